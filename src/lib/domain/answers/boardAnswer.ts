import { z } from 'zod';
import { STREAM_CLASSES, MEMBERSHIPS, TRANSIENT_STATES } from '../vocabulary';
import {
	designation,
	instant,
	personRefSchema,
	position,
	shapeAnswerSchema
} from './commonAnswers';
import { outlookRowSchema, outlookSchema } from './outlookAnswer';
import {
	decisionAnswerSchema,
	regionSchema,
	reportAnswerSchema,
	slotAnswerSchema,
	takenSchema
} from './transientAnswers';

const stripSchema = z
	.object({
		startMs: z.number(),
		stepMinutes: z.number(),
		altDeg: z.array(z.number()).describe('Of the region’s centre, one per step'),
		bands: z.array(
			z.object({
				startMs: z.number(),
				band: z.enum(['day', 'civil', 'nautical', 'astronomical', 'night'])
			})
		)
	})
	.describe('What a night strip draws');

const boardTransientSchema = z.object({
	designation,
	revision: z.number().int(),
	state: z.enum(TRANSIENT_STATES),
	isTest: z.boolean(),
	isDrill: z.boolean(),
	t0: instant,
	firstReceivedAt: instant,
	headline: z.string(),
	taken: takenSchema.nullable(),
	decision: decisionAnswerSchema.nullable(),
	parts: z.array(
		z.object({
			alertId: z.uuid(),
			packetId: z.string(),
			streamCode: z.string(),
			streamName: z.string(),
			streamClass: z.enum(STREAM_CLASSES),
			receivedAt: instant,
			membership: z.enum(MEMBERSHIPS),
			logOdds: z.number().nullable(),
			shape: shapeAnswerSchema
		})
	),
	region: regionSchema.nullable(),
	outlook: outlookSchema
		.extend({ rows: z.array(outlookRowSchema.extend({ strip: stripSchema })) })
		.nullable(),
	slots: z.array(slotAnswerSchema),
	reports: z.array(reportAnswerSchema)
});

const telescopeSchema = z.object({
	code: z.string(),
	name: z.string(),
	site: z.string(),
	apertureM: z.number(),
	latDeg: z.number(),
	lonDeg: z.number().describe('East is positive'),
	minAltDeg: z.number(),
	sunDistanceDeg: z.number(),
	filters: z.array(z.string()),
	exposureS: z.number(),
	overheadS: z.number(),
	closed: z.object({ until: instant, reason: z.string() }).nullable(),
	holds: z.array(slotAnswerSchema.extend({ designation }))
});

/** Answer of `GET /api/v1/board`, as `Board` has it; what a telescope's drawing needs besides is not described. */
export const boardSchema = z.object({
	revision: z.number().int().describe('Give it as since, or as If-None-Match, the next time'),
	serverNow: instant,
	openDesignations: z.array(designation).describe('All open transients, costliest wait first'),
	transients: z.array(boardTransientSchema).describe('With since, only those changed after it'),
	telescopes: z.array(telescopeSchema),
	watch: z
		.object({
			first: personRefSchema,
			second: personRefSchema.nullable(),
			startAt: instant,
			endAt: instant,
			next: personRefSchema.nullable()
		})
		.nullable()
});

export const slotListSchema = z.object({
	slots: z.array(
		slotAnswerSchema.extend({
			designation,
			t0: instant,
			telescopeName: z.string(),
			tiles: z.array(
				z.object({
					...position.shape,
					rotationDeg: z.number(),
					startAt: instant
				})
			)
		})
	)
});

export const skySearchAnswerSchema = z.object({
	transients: z.array(
		z.object({
			designation,
			t0: instant,
			state: z.enum(TRANSIENT_STATES),
			isTest: z.boolean(),
			isDrill: z.boolean(),
			centre: position,
			area90Deg2: z.number(),
			separationDeg: z.number().describe('From the patch’s centre to the region’s')
		})
	)
});

export const regionOutlineSchema = z.object({
	version: z.number().int(),
	outline50: z.array(z.array(position)).describe('Closed rings round the 50 % area'),
	outline90: z.array(z.array(position)).describe('Closed rings round the 90 % area')
});
