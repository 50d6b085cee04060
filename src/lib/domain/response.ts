import { z } from 'zod';

/** The steps from trigger to circular, in order. */
export const RESPONSE_STEPS = [
	'triggerToReceived',
	'receivedToTaken',
	'takenToDecision',
	'decisionToClaim',
	'claimToExposure',
	'exposureToReport',
	'reportToCircular'
] as const;
export type ResponseStep = (typeof RESPONSE_STEPS)[number];

export const RESPONSE_STEP_LABELS: Record<ResponseStep, string> = {
	triggerToReceived: 'Trigger to alert received',
	receivedToTaken: 'Received to taken',
	takenToDecision: 'Taken to decision',
	decisionToClaim: 'Decision to first claim',
	claimToExposure: 'Claim to first exposure',
	exposureToReport: 'First exposure to report',
	reportToCircular: 'Report to circular'
};

export const RESPONSE_GROUPINGS = ['telescope', 'stream'] as const;
export type ResponseGrouping = (typeof RESPONSE_GROUPINGS)[number];

export const RESPONSE_PERIODS_DAYS = [30, 90, 365] as const;

/** What `GET /api/v1/response` and the page take in their address. */
export const responseQuerySchema = z.object({
	days: z.coerce
		.number()
		.pipe(
			z.union(
				RESPONSE_PERIODS_DAYS.map((days) => z.literal(days)),
				{
					error: `must be ${RESPONSE_PERIODS_DAYS.slice(0, -1).join(', ')} or ${RESPONSE_PERIODS_DAYS.at(-1)}`
				}
			)
		)
		.default(90),
	by: z.enum(RESPONSE_GROUPINGS, 'must be telescope or stream').optional()
});
export type ResponseQuery = z.output<typeof responseQuerySchema>;

/** One step, over all transients or one group of them. Times in seconds; null where not reached. */
export type ResponseRow = {
	/** Telescope or stream; null when not grouped. */
	group: string | null;
	step: ResponseStep;
	/** How often the step began. */
	count: number;
	/** Begun and never finished: waiting now, or when the transient was closed or retracted. */
	stillOpen: number;
	medianS: number | null;
	/** 95 % interval of the median. */
	medianLowerS: number | null;
	medianUpperS: number | null;
	/** Time by which nine in ten had finished. */
	percentile90S: number | null;
};

/** Whether the groups differ in one step: log-rank test. */
export type ResponseDifference = {
	step: ResponseStep;
	chiSquare: number;
	degreesOfFreedom: number;
	pValue: number;
};

/** Share of transients still waiting for a first exposure, by time since T0 in seconds. */
export type WaitingCurve = {
	count: number;
	ended: number;
	steps: { timeS: number; share: number; lower: number | null; upper: number | null }[];
	/** Waits that ended without an exposure, or have not ended, and the curve's height there. */
	censored: { timeS: number; share: number }[];
	medianS: number | null;
	medianLowerS: number | null;
	medianUpperS: number | null;
};

export type ResponseTables = {
	days: number;
	/** Instants, ISO 8601 UTC: T0 of the transients counted lies between. */
	from: string;
	to: string;
	/** How many are counted; tests and drills never are. */
	transients: number;
	by: ResponseGrouping | null;
	rows: ResponseRow[];
	differences: ResponseDifference[];
	curve: WaitingCurve;
};

/** A time as the table shows it: `0m 22s`, `38m`, `3h 40m`, `2d 04h`. */
export function formatStepTime(seconds: number): string {
	const two = (value: number) => String(value).padStart(2, '0');
	const whole = Math.round(seconds);
	if (whole < 15 * 60) return `${Math.floor(whole / 60)}m ${two(whole % 60)}s`;
	const minutes = Math.round(seconds / 60);
	if (minutes < 60) return `${minutes}m`;
	if (minutes < 48 * 60) return `${Math.floor(minutes / 60)}h ${two(minutes % 60)}m`;
	const hours = Math.round(seconds / 3600);
	return `${Math.floor(hours / 24)}d ${two(hours % 24)}h`;
}
