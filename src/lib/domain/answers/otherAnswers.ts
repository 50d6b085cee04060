import { z } from 'zod';
import { RESPONSE_GROUPINGS, RESPONSE_STEPS, type ResponseTables } from '../response';
import { DELIVERY_STATES, CHANNELS } from '../vocabulary';
import { designation, instant, personRefSchema, share } from './commonAnswers';

export const receiptSchema = z.object({
	alertId: z.uuid(),
	stream: z.string(),
	packetId: z.string(),
	serial: z.number().int(),
	designation: designation.describe('The transient that the alert belongs to'),
	receivedAt: instant
});

export const notedSchema = z.object({
	noted: z.string().describe('Why the packet was kept but is no alert')
});

export const problemSchema = z.object({
	type: z.string().describe('urn:duskline:problem: and the code'),
	title: z.string(),
	status: z.number().int(),
	detail: z.string().describe('One sentence for a person'),
	errors: z
		.array(z.object({ pointer: z.string().describe('JSON Pointer'), detail: z.string() }))
		.optional()
		.describe('The fields that are not valid')
});

export const overlappingSchema = z.object({
	alerts: z
		.array(
			z.object({
				alertId: z.uuid(),
				streamCode: z.string(),
				streamName: z.string(),
				packetId: z.string(),
				serial: z.number().int(),
				t0: instant,
				live: z.boolean(),
				designation
			})
		)
		.nullable()
		.describe('Null for a retraction')
});

const circularSummarySchema = z.object({
	number: z.number().int(),
	designation,
	title: z.string(),
	publishedAt: instant,
	author: personRefSchema,
	toMe: z.enum(DELIVERY_STATES).nullable().describe('How it went to the one who asks')
});
export const circularListSchema = z.object({
	circulars: z.array(circularSummarySchema),
	olderBefore: z.number().int().nullable().describe('Give it as before for the next page')
});

export const circularDetailSchema = z.object({
	number: z.number().int(),
	designation,
	title: z.string(),
	body: z.string(),
	publishedAt: instant,
	author: personRefSchema,
	deliveryCounts: z.record(z.enum(DELIVERY_STATES), z.number()).nullable(),
	deliveries: z
		.array(
			z.object({
				id: z.uuid(),
				person: z.object({ name: z.string(), organisation: z.string() }),
				channel: z.enum(CHANNELS),
				state: z.enum(DELIVERY_STATES),
				attempts: z.number().int(),
				lastError: z.string().nullable(),
				queuedAt: instant,
				endedAt: instant.nullable()
			})
		)
		.nullable()
});

export const circularDraftSchema = z.object({
	draftId: z.uuid(),
	designation,
	title: z.string(),
	body: z.string(),
	recipients: z.record(z.enum(CHANNELS), z.number())
});

const seconds = z.number().nullable();
export const responseSchema = z.object({
	days: z.number().int(),
	from: instant,
	to: instant,
	transients: z.number().int(),
	by: z.enum(RESPONSE_GROUPINGS).nullable(),
	rows: z.array(
		z.object({
			group: z.string().nullable(),
			step: z.enum(RESPONSE_STEPS),
			count: z.number().int().describe('How often the step began'),
			stillOpen: z.number().int().describe('Begun and never finished'),
			medianS: seconds,
			medianLowerS: seconds,
			medianUpperS: seconds,
			percentile90S: seconds
		})
	),
	differences: z.array(
		z.object({
			step: z.enum(RESPONSE_STEPS),
			chiSquare: z.number(),
			degreesOfFreedom: z.number().int(),
			pValue: share
		})
	),
	curve: z.object({
		count: z.number().int(),
		ended: z.number().int(),
		steps: z.array(
			z.object({
				timeS: z.number(),
				share,
				lower: share.nullable(),
				upper: share.nullable()
			})
		),
		censored: z.array(z.object({ timeS: z.number(), share })),
		medianS: seconds,
		medianLowerS: seconds,
		medianUpperS: seconds
	})
}) satisfies z.ZodType<ResponseTables>;

export const pushDevicesSchema = z.object({
	devices: z.array(
		z.object({
			id: z.uuid(),
			name: z.string(),
			endpoint: z.url(),
			createdAt: instant,
			lastSentAt: instant.nullable()
		})
	)
});
