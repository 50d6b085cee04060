import { z } from 'zod';
import type { BoardRegion, BoardReport, BoardSlot } from '../board';
import { DECISIONS, REPORT_KINDS, SLOT_STATES } from '../vocabulary';
import { instant, personRefSchema, position, share } from './commonAnswers';

export const regionMethod = z.enum(['closed', 'mesh', 'none']);

export const regionSchema = z.object({
	version: z.number().int(),
	method: regionMethod.describe('closed form, mesh of cells, or none'),
	centre: position,
	sigmaDeg: z.number().nullable(),
	area50Deg2: z.number(),
	area90Deg2: z.number(),
	equivalentRadiusDeg: z.number().describe('Of the circle with the 90 % area'),
	logOddsAgreement: z
		.number()
		.nullable()
		.describe('Natural log of the odds of one source; null with fewer than two live alerts'),
	before: z.object({ area90Deg2: z.number(), cause: z.string() }).nullable(),
	searched: z
		.object({ reports: z.number().int(), tooFaintChance: share })
		.nullable()
		.describe('Reports of nothing that it takes into account')
}) satisfies z.ZodType<BoardRegion>;

export const takenSchema = z.object({ by: personRefSchema, at: instant });
export const decisionAnswerSchema = z.object({
	decision: z.enum(DECISIONS),
	by: personRefSchema,
	at: instant,
	reason: z.string()
});

export const slotAnswerSchema = z.object({
	id: z.uuid(),
	telescopeCode: z.string(),
	startAt: instant,
	endAt: instant,
	state: z.enum(SLOT_STATES),
	filter: z.string(),
	exposureS: z.number(),
	catch: share.describe('Chance to detect the counterpart when it was offered or claimed'),
	claimedBy: personRefSchema.nullable(),
	claimedAt: instant.nullable()
}) satisfies z.ZodType<BoardSlot>;

export const reportAnswerSchema = z.object({
	id: z.uuid(),
	telescopeCode: z.string().nullable(),
	telescopeName: z.string().nullable(),
	kind: z.enum(REPORT_KINDS),
	filter: z.string().nullable(),
	observedAt: instant.describe('Middle of the exposure'),
	magnitude: z.number().nullable(),
	magnitudeError: z.number().nullable(),
	limitMag: z.number().nullable().describe('5-sigma upper limit'),
	remarks: z.string(),
	reportedBy: personRefSchema
}) satisfies z.ZodType<BoardReport>;
