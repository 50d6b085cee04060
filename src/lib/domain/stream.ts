import { z } from 'zod';
import { formNumber } from './formFields';
import { STREAM_CLASSES, type StreamClass } from './vocabulary';

const text = (most: number, what: string) =>
	z.string().trim().min(1, `${what} is needed.`).max(most, `At most ${most} characters.`);

/** The numbers that a VOEvent has no place of its own for, with their names on screen. */
export const MAPPED_PARAMS = {
	significance: { label: 'Significance', unit: '' },
	falseAlarmPerYear: { label: 'False alarms a year', unit: '' },
	systematicDeg: { label: 'Systematic error', unit: 'deg' }
} as const;
export type MappedParam = keyof typeof MAPPED_PARAMS;

/** A Param by name, in a Group or Table or outside (an empty group); its value is multiplied by `factor`. */
export type ParamSource = { group: string; name: string; factor: number };
export type ParamMap = Partial<Record<MappedParam, ParamSource>>;

const paramName = z.string().trim().max(100, 'At most 100 characters.').default('');

/** A row of the form; without a name it maps nothing. */
const paramRow = z
	.object({
		group: paramName,
		name: paramName,
		factor: z.preprocess(
			(typed) => (typed === '' || typed === undefined ? 1 : typed),
			formNumber(1e-12, 1e12)
		)
	})
	.refine((row) => row.name !== '' || row.group === '', {
		path: ['name'],
		error: 'The name of the Param is needed.'
	});

const paramMap = z
	.object({
		significance: paramRow.optional(),
		falseAlarmPerYear: paramRow.optional(),
		systematicDeg: paramRow.optional()
	})
	.transform((rows): ParamMap =>
		Object.fromEntries(
			Object.entries(rows).filter(([, row]) => row !== undefined && row.name !== '')
		)
	);

const STREAM_FIELDS = {
	name: text(60, 'A name'),
	streamClass: z.enum(STREAM_CLASSES, 'Choose a kind of instrument.'),
	defaultContainment: formNumber(0.01, 0.999),
	defaultSystematicDeg: formNumber(0, 30, 'degrees'),
	alertsPerYear: formNumber(0.1, 100_000, 'a year'),
	coincidenceWindowS: formNumber(1, 604_800, 'seconds'),
	silentAfterMinutes: formNumber(1, 525_600, 'minutes').pipe(z.number().int('Whole minutes only.')),
	fadeM1Mean: formNumber(5, 40, 'mag'),
	fadeM1Spread: formNumber(0.1, 10, 'mag'),
	fadeAlpha: formNumber(0, 5),
	paramMap: paramMap.optional()
};

/** A changed stream. Its code stays: packets cite by it. */
export const streamEditSchema = z.object(STREAM_FIELDS);
export type StreamEdit = z.output<typeof streamEditSchema>;

/** A new stream. */
export const streamCreateSchema = z.object({
	code: z
		.string()
		.trim()
		.regex(
			/^[a-z][a-z0-9-]{1,30}$/,
			'2 to 31 lower-case letters, digits or hyphens, a letter first.'
		),
	...STREAM_FIELDS
});
export type StreamCreate = z.output<typeof streamCreateSchema>;

export const streamKeyCreateSchema = z.object({
	label: text(60, 'A name for the key')
});

export const streamKeyRevokeSchema = z.object({ keyId: z.uuid('There is no such key.') });

/** What the streams page shows; instants are ISO 8601 UTC strings. */
export type StreamOverview = {
	code: string;
	name: string;
	streamClass: StreamClass;
	lastHeardAt: string | null;
	/** Nothing heard for longer than the stream is expected to be silent. */
	silent: boolean;
	retired: boolean;
	/** Packets taken in, and refused, in the last 24 h. */
	packets24h: number;
	refused24h: number;
	liveKeys: number;
};

export type StreamKeyView = {
	id: string;
	label: string;
	prefix: string;
	createdAt: string;
	createdBy: string | null;
	lastUsedAt: string | null;
	revokedAt: string | null;
};

export type StreamDetail = StreamOverview & {
	settings: StreamEdit;
	keys: StreamKeyView[];
	/** The latest refusals, newest first. */
	refusals: { at: string; code: string; detail: string }[];
};
