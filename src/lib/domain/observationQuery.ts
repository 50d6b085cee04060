import { z } from 'zod';
import { instantSchema } from './alertPacket';
import { designationSchema } from './regroup';

/** What `GET /api/v1/observations.csv` and `.vot` take: slots that overlap `from` to `to`, of one transient or all. */
export const observationQuerySchema = z.strictObject({
	designation: designationSchema.optional(),
	from: instantSchema.optional(),
	to: instantSchema.optional()
});
export type ObservationQuery = z.output<typeof observationQuerySchema>;
