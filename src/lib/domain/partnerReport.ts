import { z } from 'zod';
import { instantSchema } from './alertPacket';

const magnitude = z.coerce.number().min(-5).max(35);
const optionalNumber = <Schema extends z.ZodType>(schema: Schema) =>
	z.preprocess((value) => (value === '' || value === null ? undefined : value), schema.optional());

/** What a partner saw of a published transient with a telescope of their own. */
export const partnerReportSchema = z
	.strictObject({
		/** Made by the sender when the form was opened: the same id twice is one report. */
		reportId: z.uuid(),
		designation: z.string().min(1, 'choose what it is about').max(20),
		kind: z.enum(['detection', 'limit'], { error: 'must be a detection or an upper limit' }),
		filter: z.string().trim().min(1, 'name the filter').max(20),
		/** Middle of the exposure. */
		observedAt: instantSchema,
		exposureS: optionalNumber(z.coerce.number().positive().max(86_400)),
		magnitude: optionalNumber(magnitude),
		magnitudeError: optionalNumber(z.coerce.number().positive().max(5)),
		limitMag: optionalNumber(magnitude),
		/** Telescope, site, calibration: what others need to use the value. */
		remarks: z.string().trim().max(4000).default('')
	})
	.superRefine((report, context) => {
		const issue = (path: 'magnitude' | 'magnitudeError' | 'limitMag', message: string) =>
			context.addIssue({ code: 'custom', path: [path], message });
		if (report.kind === 'detection') {
			if (report.magnitude === undefined) issue('magnitude', 'is needed for a detection');
			if (report.magnitudeError === undefined) issue('magnitudeError', 'is needed for a detection');
			if (report.limitMag !== undefined) {
				issue('limitMag', 'belongs to an upper limit, not to a detection');
			}
		} else {
			if (report.limitMag === undefined) issue('limitMag', 'is needed for an upper limit');
			if (report.magnitude !== undefined) {
				issue('magnitude', 'belongs to a detection, not to an upper limit');
			}
		}
	});
export type PartnerReport = z.output<typeof partnerReportSchema>;

/**
 * The same as an HTML form sends it: its box for an instant has no zone and means UTC, and what belongs to the
 * other kind of report may be left over in a hidden box.
 */
export const partnerReportFormSchema = z.preprocess((form) => {
	const { magnitude, magnitudeError, limitMag, observedAt, ...rest } = form as Record<
		string,
		unknown
	>;
	return {
		...rest,
		observedAt:
			typeof observedAt === 'string' && /^[\d-]+[T ][\d:]+$/.test(observedAt)
				? `${observedAt.replace(' ', 'T').slice(0, 16)}:00Z`
				: observedAt,
		...(rest.kind === 'detection' ? { magnitude, magnitudeError } : { limitMag })
	};
}, partnerReportSchema);

export type PartnerReportRow = {
	designation: string;
	kind: 'detection' | 'limit';
	filter: string | null;
	observedAt: string;
	reportedAt: string;
	magnitude: number | null;
	magnitudeError: number | null;
	limitMag: number | null;
	remarks: string;
};
