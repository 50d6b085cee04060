import { z } from 'zod';
import { DECISIONS } from './vocabulary';

/** Body of `POST /api/v1/transients/{designation}/decision`. A changed decision needs a reason. */
export const decisionSchema = z.strictObject({
	decision: z.enum(DECISIONS),
	reason: z.string().max(1000).default('')
});
export type DecisionInput = z.output<typeof decisionSchema>;
