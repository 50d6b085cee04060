import { z } from 'zod';
import { DECISIONS, TRANSIENT_STATES } from '$lib/domain/vocabulary';
import { parsePosition } from '$lib/sky/positionText';
import { loadPage } from '$lib/server/http/page';
import { listTransients } from '$lib/server/transients/transientList';
import type { PageServerLoad } from './$types';

const DEFAULT_RADIUS_DEG = 1;

/** Odd values in a link mean no filter: an old bookmark must not break the page. */
const querySchema = z.object({
	search: z.string().trim().max(20).catch(''),
	state: z.enum(TRANSIENT_STATES).optional().catch(undefined),
	decision: z.enum(DECISIONS).optional().catch(undefined),
	/** Pasted whole. */
	position: z.string().trim().max(80).catch(''),
	radius: z.coerce.number().min(0).max(180).catch(DEFAULT_RADIUS_DEG),
	before: z.coerce.date().optional().catch(undefined)
});

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const query = querySchema.parse({
			search: '',
			...Object.fromEntries(event.url.searchParams)
		});
		const { before, ...filter } = query;
		const { position, radius, ...rest } = filter;
		const centre = position ? parsePosition(position) : null;
		const list = await listTransients(event.locals.app, event.locals.actor, {
			...rest,
			patch: centre ? { ...centre, radiusDeg: radius } : undefined,
			before
		});
		return {
			...list,
			filter,
			first: before === undefined,
			positionUnread: position !== '' && centre === null
		};
	});
