import { z } from 'zod';

/** Which circulars somebody wants, and how. */
export const preferencesSchema = z.strictObject({
	byEmail: z.boolean(),
	byPush: z.boolean(),
	/** Only transients with an alert of one of these streams; empty means all. */
	streamCodes: z.array(z.string().regex(/^[a-z][a-z0-9-]{1,30}$/)).max(50),
	/** The telescope whose outlook goes into the mail. */
	telescopeCode: z
		.string()
		.regex(/^[A-Z]{3}$/, 'must be a telescope of the network')
		.nullable()
});
export type Preferences = z.output<typeof preferencesSchema>;

/** The same as an HTML form sends it: absent boxes are off. */
export const preferencesFormSchema = z
	.object({
		byEmail: z.literal('on').optional(),
		byPush: z.literal('on').optional(),
		streamCodes: z.array(z.string()),
		telescopeCode: z.string().optional()
	})
	.transform((form) => ({
		byEmail: form.byEmail === 'on',
		byPush: form.byPush === 'on',
		streamCodes: form.streamCodes,
		telescopeCode: form.telescopeCode || null
	}))
	.pipe(preferencesSchema);

export type PreferencesView = {
	preferences: Preferences;
	streams: { code: string; name: string }[];
	telescopes: { code: string; name: string; site: string }[];
	/** Public VAPID key (RFC 8292), base64url; null when this installation sends no push. */
	pushKey: string | null;
	devices: PushDevice[];
};

export const MOST_PUSH_DEVICES = 10;

const base64url = (bytes: number) =>
	z
		.string()
		.regex(/^[A-Za-z0-9_-]+={0,2}$/, 'must be base64url')
		.refine((text) => Math.floor((text.replace(/=+$/, '').length * 3) / 4) === bytes, {
			error: `must be ${bytes} bytes in base64url`
		});

/** Body of `POST /api/v1/push-devices`: a browser's push subscription and what its owner calls it. */
export const pushDeviceSchema = z.strictObject({
	name: z.string().trim().min(1, 'must have a name').max(60),
	endpoint: z.url({ protocol: /^https$/, error: 'must be an https address' }).max(1000),
	keys: z.strictObject({
		/** Public key on P-256, uncompressed (RFC 8291). */
		p256dh: base64url(65),
		auth: base64url(16)
	})
});
export type PushDeviceInput = z.output<typeof pushDeviceSchema>;

export type PushDevice = {
	id: string;
	name: string;
	endpoint: string;
	createdAt: string;
	lastSentAt: string | null;
};
