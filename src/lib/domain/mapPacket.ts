import { z } from 'zod';
import type { MapSource } from '../sky/regions/mapShapeFrom';
import { FLAT_ORDER_MAX } from '../sky/regions/shape';

/** Numbers of which the first that is wrong is named: a map of bad pixels must not make an answer as long as itself. */
const values = z
	.array(z.unknown())
	.min(1)
	.superRefine((list, context) => {
		const wrong = list.findIndex((value) => !(typeof value === 'number' && value >= 0));
		if (wrong < 0) return;
		context.addIssue({ code: 'custom', path: [wrong], message: 'must be a number, at least 0' });
	})
	.transform((list) => list as number[]);

/**
 * A probability map in a packet: either `uniq` and `density` (multi-order, ICRS unless `frame` says otherwise) or
 * every pixel of one `order` or `nside` as `density` or `probability`, with `ordering` and `frame`.
 */
export const mapSchema = z
	.strictObject({
		kind: z.literal('map'),
		uniq: values.optional(),
		order: z.number().int().min(0).max(FLAT_ORDER_MAX).optional(),
		nside: z
			.number()
			.refine(
				(nside) => Number.isInteger(Math.log2(nside)) && nside >= 1 && nside <= 2 ** FLAT_ORDER_MAX,
				`must be a power of 2 from 1 to ${2 ** FLAT_ORDER_MAX}`
			)
			.optional(),
		ordering: z.enum(['nested', 'ring']).optional(),
		frame: z.enum(['icrs', 'galactic']).optional(),
		density: values.optional(),
		probability: values.optional()
	})
	.superRefine((map, context) => {
		const complain = (field: string, message: string) =>
			context.addIssue({ code: 'custom', path: [field], message });
		const { uniq, order, nside, ordering, frame, density, probability } = map;
		if (uniq) {
			if (!density) complain('density', 'is needed beside uniq');
			for (const [field, value] of Object.entries({ order, nside, ordering, probability })) {
				if (value !== undefined) complain(field, 'must not be given beside uniq');
			}
			return;
		}
		if (order === undefined && nside === undefined) {
			complain('order', 'is needed, or nside, or uniq for a map of several orders');
		}
		if (order !== undefined && nside !== undefined)
			complain('nside', 'must not be given beside order');
		if (!ordering) complain('ordering', 'is needed: nested or ring');
		if (!frame) complain('frame', 'is needed: icrs or galactic');
		if (!density && !probability) complain('density', 'is needed, or probability');
		if (density && probability) complain('probability', 'must not be given beside density');
	});

/** A map as a packet gives it. */
export type MapPacket = z.output<typeof mapSchema>;

/** The map that a valid packet describes. */
export function mapSourceOf(map: MapPacket): MapSource {
	const { uniq, order, nside, ordering = 'nested', frame = 'icrs', density, probability } = map;
	if (uniq) return { uniq, density: density ?? [], frame };
	const size = order === undefined ? { nside: nside ?? 0 } : { order };
	const pixels = density ? { density } : { probability: probability ?? [] };
	return { ...size, ordering, frame, ...pixels };
}
