import { z } from 'zod';
import { normaliseDeg } from '../sky/angle';
import { mapSchema } from './mapPacket';
import { ALERT_KINDS, ALERT_ROLES, CITATION_RELATIONS } from './vocabulary';

const finite = (low: number, high: number) => z.number().min(low).max(high);

/** ICRS position in degrees; a right ascension outside [0, 360) is folded into it. */
export const equatorialSchema = z.strictObject({
	raDeg: finite(-3600, 3600).transform(normaliseDeg),
	decDeg: finite(-90, 90)
});

const radiusDeg = z.number().positive().max(180);
const containment = z
	.number()
	.gt(0, 'must be between 0 and 1: the share of the probability inside the radius')
	.lt(1, 'must be between 0 and 1: the share of the probability inside the radius');

export const shapeSchema = z.discriminatedUnion('kind', [
	z.strictObject({
		kind: z.literal('circle'),
		centre: equatorialSchema,
		radiusDeg,
		containment,
		systematicDeg: finite(0, 60).optional()
	}),
	z.strictObject({ kind: z.literal('hardCircle'), centre: equatorialSchema, radiusDeg }),
	z
		.strictObject({
			kind: z.literal('ellipse'),
			centre: equatorialSchema,
			semiMajorDeg: z.number().positive().max(45),
			semiMinorDeg: z.number().positive().max(45),
			positionAngleDeg: finite(-360, 360),
			containment
		})
		.refine((shape) => shape.semiMinorDeg <= shape.semiMajorDeg, {
			path: ['semiMinorDeg'],
			error: 'must not exceed semiMajorDeg'
		}),
	z.strictObject({
		kind: z.literal('annulus'),
		centre: equatorialSchema,
		radiusDeg,
		halfWidthDeg: z.number().positive().max(90),
		containment
	}),
	z.strictObject({
		kind: z.literal('polygon'),
		vertices: z.array(equatorialSchema).min(3).max(200)
	}),
	mapSchema
]);

const packetId = z
	.string()
	.min(1)
	.max(200)
	.regex(/^[\x21-\x7e]+$/, 'must be printable ASCII without spaces');

export const citationSchema = z.strictObject({
	stream: z.string().regex(/^[a-z][a-z0-9-]{1,30}$/),
	packetId,
	relation: z.enum(CITATION_RELATIONS)
});

/** UTC instant between 1990 and 2100, ISO 8601 with a zone. */
export const instantSchema = z.iso
	.datetime({
		offset: true,
		error: 'must be an ISO 8601 time with its zone, as 2026-12-01T03:41:27Z'
	})
	.refine((text) => {
		const year = new Date(text).getUTCFullYear();
		return year >= 1990 && year < 2100;
	}, 'must lie between the years 1990 and 2100');

/** It is stored where no NUL can be. */
const remarks = z
	.string()
	.max(4000)
	.refine((text) => !text.includes('\u0000'), 'must not contain the character NUL')
	.default('');

const CONTENT_FIELDS = {
	packetId,
	serial: z.number().int().min(1).max(1_000_000),
	role: z.enum(ALERT_ROLES),
	kind: z.enum(ALERT_KINDS),
	t0: instantSchema,
	shape: shapeSchema.optional(),
	significance: finite(0, 1e6).optional(),
	falseAlarmPerYear: finite(0, 1e9).optional(),
	remarks
};

type KindAndShape = {
	kind: (typeof ALERT_KINDS)[number];
	serial: number;
	shape?: unknown;
	cites: { relation: string }[];
};

function checkKind(packet: KindAndShape, context: z.RefinementCtx): void {
	const issue = (path: string, message: string) =>
		context.addIssue({ code: 'custom', path: [path], message });
	if (packet.kind !== 'retraction') {
		if (!packet.shape) issue('shape', `is needed in a packet of kind ${packet.kind}`);
		return;
	}
	if (packet.shape) issue('shape', 'must not be given in a retraction');
	if (packet.serial === 1 && !packet.cites.some((cite) => cite.relation === 'retraction')) {
		issue('cites', 'must name the packet that is retracted');
	}
}

/** Body of `POST /api/v1/alerts`. */
export const alertPacketSchema = z
	.strictObject({ ...CONTENT_FIELDS, cites: z.array(citationSchema).max(20).default([]) })
	.superRefine(checkKind);

export type AlertPacket = z.output<typeof alertPacketSchema>;

/** What an alert says, whatever format it was written in: a citation need not know the stream. */
export const alertContentSchema = z
	.strictObject({
		...CONTENT_FIELDS,
		cites: z
			.array(citationSchema.extend({ stream: citationSchema.shape.stream.nullable() }))
			.max(20)
	})
	.superRefine(checkKind);

export type AlertContent = z.output<typeof alertContentSchema>;
