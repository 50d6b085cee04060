import { z } from 'zod';
import { failForgottenDeliveries } from './deliveryLedgerService';
import type { Job } from '../jobs/queue';

/** Looks for deliveries that nothing will try any more. */
export const failForgottenDeliveriesJob: Job<Record<string, never>> = {
	name: 'circular.failForgotten',
	payload: z.strictObject({}),
	handle: (app) => failForgottenDeliveries(app),
	retryLimit: 1,
	concurrency: 1,
	schedule: { cron: '*/15 * * * *', payload: {} }
};
