import { z } from 'zod';
import type { Job } from '../jobs/queue';
import { fillAlertSky } from './alertSky';

/** Works out the sky of alerts that came in without it: all shapes but circles, and those of earlier versions. */
export const fillAlertSkyJob: Job<Record<string, never>> = {
	name: 'alert.fillSky',
	payload: z.strictObject({}),
	retryLimit: 5,
	concurrency: 1,
	coalesce: true,
	handle: (app) => fillAlertSky(app)
};
