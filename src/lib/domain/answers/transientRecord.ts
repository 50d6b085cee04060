import { z } from 'zod';
import {
	ALERT_KINDS,
	ALERT_ROLES,
	JOURNAL_KINDS,
	MEMBERSHIPS,
	TRANSIENT_STATES
} from '../vocabulary';
import {
	designation,
	instant,
	personRefSchema,
	position,
	shapeAnswerSchema
} from './commonAnswers';
import { outlookSchema } from './outlookAnswer';
import {
	decisionAnswerSchema,
	regionMethod,
	regionSchema,
	reportAnswerSchema,
	slotAnswerSchema,
	takenSchema
} from './transientAnswers';

/** Answer of `GET /api/v1/transients/{designation}`: everything about one transient. */
export const transientRecordSchema = z.strictObject({
	designation,
	state: z.enum(TRANSIENT_STATES),
	isTest: z.boolean().describe('All its alerts are tests'),
	isDrill: z.boolean().describe('A rehearsal'),
	t0: instant.describe('Earliest T0 of its live alerts'),
	firstReceivedAt: instant,
	headline: z.string(),
	taken: takenSchema.nullable(),
	decision: decisionAnswerSchema.nullable(),
	region: regionSchema.nullable().describe('The joint region in force'),
	regions: z
		.array(
			z.strictObject({
				version: z.number().int(),
				computedAt: instant,
				cause: z.string(),
				alertCount: z.number().int(),
				method: regionMethod,
				centre: position,
				area50Deg2: z.number(),
				area90Deg2: z.number(),
				logOddsAgreement: z.number().nullable()
			})
		)
		.describe('Every version of it, oldest first'),
	alerts: z
		.array(
			z.strictObject({
				id: z.uuid(),
				packetId: z.string(),
				serial: z.number().int(),
				streamCode: z.string(),
				streamName: z.string(),
				role: z.enum(ALERT_ROLES),
				kind: z.enum(ALERT_KINDS),
				t0: instant,
				receivedAt: instant,
				live: z.boolean().describe('Neither replaced nor retracted'),
				membership: z.enum(MEMBERSHIPS),
				logOdds: z.number().nullable().describe('Natural log of the odds that it belongs'),
				shape: shapeAnswerSchema.nullable(),
				significance: z.number().nullable(),
				falseAlarmPerYear: z.number().nullable(),
				remarks: z.string()
			})
		)
		.describe('In order of arrival'),
	outlook: outlookSchema.nullable(),
	slots: z.array(slotAnswerSchema).describe('Without those released or lapsed'),
	reports: z.array(reportAnswerSchema).describe('Without those withdrawn'),
	circulars: z.array(
		z.strictObject({ number: z.number().int(), title: z.string(), publishedAt: instant })
	),
	journal: z
		.array(
			z.strictObject({
				id: z.number().int(),
				at: instant,
				kind: z.enum(JOURNAL_KINDS),
				summary: z.string(),
				actor: personRefSchema.nullable()
			})
		)
		.describe('What happened, newest first')
});
export type TransientRecord = z.output<typeof transientRecordSchema>;
