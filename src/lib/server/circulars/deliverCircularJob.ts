import { z } from 'zod';
import { deliverCircular, MOST_DELIVERY_ATTEMPTS } from './deliveryService';
import type { Job } from '../jobs/queue';

/** Sends one circular to one person by one channel. */
export const deliverCircularJob: Job<{ deliveryId: string }> = {
	name: 'circular.deliver',
	payload: z.strictObject({ deliveryId: z.uuid() }),
	handle: (app, { deliveryId }) => deliverCircular(app, deliveryId),
	retryLimit: MOST_DELIVERY_ATTEMPTS - 1,
	concurrency: 2
};
