import { z } from 'zod';
import type { Job } from '../jobs/queue';
import { resumePackets } from './quarantineService';

/** Judges bodies that a process kept and then ended over. */
export const resumePacketsJob: Job<Record<string, never>> = {
	name: 'packets.resume',
	payload: z.strictObject({}),
	retryLimit: 3,
	concurrency: 1,
	coalesce: true,
	schedule: { cron: '* * * * *', payload: {} },
	handle: async (app) => {
		await resumePackets(app);
	}
};
