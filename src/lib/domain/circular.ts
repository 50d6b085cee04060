import { z } from 'zod';
import type { PersonRef } from './board';
import type { Channel, DeliveryState } from './vocabulary';

/** Longest line of a circular, so that it reads the same in every mail program. */
export const CIRCULAR_COLUMNS = 72;

const oneLine = /^[^\p{Cc}\u2028\u2029]*$/u;
/** Line breaks and tabs are the only control characters that a body may hold. */
// eslint-disable-next-line no-control-regex
const plainText = /^[^\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]*$/;

/** Body of `POST /api/v1/circulars`. */
export const publishSchema = z.strictObject({
	/** Made by the sender when the draft was opened: the same key twice is one circular. */
	draftId: z.uuid(),
	designation: z.string().min(1).max(20),
	title: z
		.string()
		.trim()
		.min(1, 'must say something')
		.max(120, 'must be at most 120 characters')
		.regex(oneLine, 'must be one line'),
	body: z
		.string()
		.transform((text) => text.replace(/\r\n?/g, '\n').trim())
		.pipe(
			z
				.string()
				.min(1, 'must say something')
				.max(20_000, 'must be at most 20 000 characters')
				.regex(plainText, 'must be plain text')
		)
});
export type PublishInput = z.output<typeof publishSchema>;

/** What the archive's address may hold. */
export const circularFilterSchema = z.object({
	designation: z.string().max(20).optional(),
	search: z.string().trim().max(100).optional(),
	/** Only numbers below this one: the next page. */
	before: z.coerce.number().int().min(1).max(999_999_999).optional(),
	mine: z.literal('on').optional()
});

/** A pre-filled text, not yet kept anywhere. */
export type CircularDraft = {
	draftId: string;
	designation: string;
	title: string;
	body: string;
	/** How many would get it, by channel. */
	recipients: Record<Channel, number>;
};

/** Instants are ISO 8601 UTC strings. */
export type CircularSummary = {
	number: number;
	designation: string;
	title: string;
	publishedAt: string;
	author: PersonRef;
	/** By channel, how this circular went to the person who asks; null when it did not. */
	toMe: DeliveryState | null;
};

export type DeliveryRow = {
	id: string;
	person: { name: string; organisation: string };
	channel: Channel;
	state: DeliveryState;
	attempts: number;
	lastError: string | null;
	queuedAt: string;
	endedAt: string | null;
};

export type CircularDetail = {
	number: number;
	designation: string;
	title: string;
	body: string;
	publishedAt: string;
	author: PersonRef;
	/** Null for those who may not see how it went out. */
	deliveryCounts: Record<DeliveryState, number> | null;
	/** Null for those who may not see names. */
	deliveries: DeliveryRow[] | null;
};

export const CHANNEL_LABELS: Record<Channel, string> = {
	email: 'E-mail',
	push: 'Push'
};

export const DELIVERY_STATE_LABELS: Record<DeliveryState, string> = {
	queued: 'Waiting to go out',
	sent: 'Sent',
	failed: 'Failed'
};
