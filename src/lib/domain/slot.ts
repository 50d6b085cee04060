import { z } from 'zod';
import { instantSchema } from './alertPacket';
import { REPORT_KINDS } from './vocabulary';

// Apart, so that a screen that needs the states does not carry the schemas' library.
export { SLOT_TRANSITIONS, slotMayBecome } from './slotStates';

/** Body of `POST /api/v1/slots`: claims a telescope for a transient. */
export const claimSchema = z
	.strictObject({
		designation: z.string().min(1).max(20),
		telescopeCode: z.string().regex(/^[A-Z]{3}$/),
		startAt: instantSchema,
		endAt: instantSchema,
		filter: z.string().min(1).max(20).optional()
	})
	.refine((claim) => new Date(claim.endAt) > new Date(claim.startAt), {
		path: ['endAt'],
		error: 'must be after the start'
	})
	.refine((claim) => Date.parse(claim.endAt) - Date.parse(claim.startAt) <= 14 * 3_600_000, {
		path: ['endAt'],
		error: 'must be within 14 hours of the start'
	});
export type Claim = z.output<typeof claimSchema>;

const magnitude = z.number().min(-5).max(35);

/** Body of `POST /api/v1/slots/{id}/report`. */
export const reportSchema = z
	.strictObject({
		kind: z.enum(REPORT_KINDS),
		filter: z.string().min(1).max(20).optional(),
		observedAt: instantSchema,
		exposureS: z.number().positive().max(86_400).optional(),
		magnitude: magnitude.optional(),
		magnitudeError: z.number().positive().max(5).optional(),
		limitMag: magnitude.optional(),
		raDeg: z.number().min(0).lt(360).optional(),
		decDeg: z.number().min(-90).max(90).optional(),
		remarks: z.string().max(4000).default('')
	})
	.superRefine((report, context) => {
		const need = (path: 'magnitude' | 'magnitudeError' | 'limitMag' | 'filter', why: string) => {
			if (report[path] === undefined)
				context.addIssue({ code: 'custom', path: [path], message: why });
		};
		const refuse = (path: 'magnitude' | 'limitMag', why: string) => {
			if (report[path] !== undefined)
				context.addIssue({ code: 'custom', path: [path], message: why });
		};
		if (report.kind === 'detection') {
			need('magnitude', 'is needed for a detection');
			need('magnitudeError', 'is needed for a detection');
			need('filter', 'is needed for a detection');
			refuse('limitMag', 'belongs to an upper limit, not to a detection');
		} else if (report.kind === 'limit') {
			need('limitMag', 'is needed for an upper limit');
			need('filter', 'is needed for an upper limit');
			refuse('magnitude', 'belongs to a detection, not to an upper limit');
		} else {
			refuse('magnitude', 'belongs to a detection');
			refuse('limitMag', 'belongs to an upper limit');
		}
		if ((report.raDeg === undefined) !== (report.decDeg === undefined)) {
			context.addIssue({
				code: 'custom',
				path: [report.raDeg === undefined ? 'raDeg' : 'decDeg'],
				message: 'right ascension and declination go together'
			});
		}
	});
export type ReportInput = z.output<typeof reportSchema>;

/** Body of `POST /api/v1/reports/{id}/withdraw`. */
export const withdrawSchema = z.strictObject({ reason: z.string().trim().min(1).max(1000) });
