import { z } from 'zod';
import type { Job } from '../jobs/queue';
import { tellOfSilentStreams } from './silence';

/** Looks for streams that are silent for longer than they should be. */
export const silentStreamsJob: Job<Record<string, never>> = {
	name: 'streams.silent',
	payload: z.strictObject({}),
	retryLimit: 3,
	concurrency: 1,
	coalesce: true,
	schedule: { cron: '*/5 * * * *', payload: {} },
	handle: async (app) => {
		await tellOfSilentStreams(app);
	}
};
