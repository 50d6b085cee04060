import { z } from 'zod';
import type { Job } from '../jobs/queue';
import { refreshOutlook } from './outlookService';

/** Computes one transient's outlook anew. */
export const refreshOutlookJob: Job<{ transientId: string }> = {
	name: 'outlook.refresh',
	payload: z.strictObject({ transientId: z.uuid() }),
	retryLimit: 5,
	concurrency: 2,
	coalesce: true,
	handle: (app, { transientId }) => refreshOutlook(app, transientId)
};
