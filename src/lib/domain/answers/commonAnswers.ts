import { z } from 'zod';
import type { PersonRef } from '../board';
import { DESIGNATION_EXAMPLE } from './exampleValues';

/** Instants in answers: ISO 8601, UTC. */
export const instant = z.iso.datetime();

export const designation = z.string().meta({ examples: [DESIGNATION_EXAMPLE] });

export const share = z.number().min(0).max(1);

export const position = z
	.object({ raDeg: z.number(), decDeg: z.number() })
	.describe('Right ascension and declination, ICRS');

export const personRefSchema = z.object({
	id: z.uuid(),
	name: z.string(),
	initials: z.string()
}) satisfies z.ZodType<PersonRef>;

const radiusDeg = z.number();
const containment = share.describe('Share of the probability inside the size given');

/** A position as an answer gives it: as in a packet, but of a map only that it is one. */
export const shapeAnswerSchema = z.discriminatedUnion('kind', [
	z.object({
		kind: z.literal('circle'),
		centre: position,
		radiusDeg,
		containment,
		systematicDeg: z.number().optional().describe('One standard deviation per axis')
	}),
	z.object({ kind: z.literal('hardCircle'), centre: position, radiusDeg }),
	z.object({
		kind: z.literal('ellipse'),
		centre: position,
		semiMajorDeg: z.number(),
		semiMinorDeg: z.number(),
		positionAngleDeg: z.number().describe('Of the long axis, from north through east'),
		containment
	}),
	z.object({
		kind: z.literal('annulus'),
		centre: position,
		radiusDeg,
		halfWidthDeg: z.number(),
		containment
	}),
	z.object({ kind: z.literal('polygon'), vertices: z.array(position) }),
	z.object({ kind: z.literal('map') }).describe('A probability map; its cells are left out here')
]);
