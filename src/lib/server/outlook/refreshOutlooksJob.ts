import { z } from 'zod';
import type { Job } from '../jobs/queue';
import { closeStaleTransients } from '../transients/closeStale';
import { requestAllOutlooks } from './outlookRequests';

/** Asks for the outlook of every open transient: a limit changed, or time has passed. */
export const refreshOutlooksJob: Job<{ reason: string }> = {
	name: 'outlook.refreshAll',
	payload: z.strictObject({ reason: z.string().max(200) }),
	retryLimit: 5,
	concurrency: 1,
	coalesce: true,
	schedule: { cron: '*/5 * * * *', payload: { reason: 'time has passed' } },
	handle: async (app) => {
		await closeStaleTransients(app);
		await requestAllOutlooks(app);
	}
};
