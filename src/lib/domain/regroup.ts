import { z } from 'zod';

export const designationSchema = z
	.string()
	.regex(/^D\d{2}[A-L]\d{2}-[a-z]{1,4}$/, 'must be a designation, as D26L01-b');

/**
 * Body of `POST /api/v1/alerts/{id}/membership`: the alert belongs where it is (`confirm`), gets a
 * transient of its own (`split`), or belongs to another one (`move`).
 */
export const membershipSchema = z.discriminatedUnion('action', [
	z.strictObject({ action: z.literal('confirm') }),
	z.strictObject({ action: z.literal('split') }),
	z.strictObject({ action: z.literal('move'), to: designationSchema })
]);
export type MembershipInput = z.output<typeof membershipSchema>;

/** Body of `POST /api/v1/transients/{designation}/merge`: everything of it goes to `into`. */
export const mergeSchema = z.strictObject({ into: designationSchema });
export type MergeInput = z.output<typeof mergeSchema>;
