import { z } from 'zod';
import type { Depth, Detector, TelescopeLimits } from '../sky/visibility/telescope';
import { formInstant, formNumber } from './formFields';

/** Below this distance to the Sun a person must confirm it: optics and detectors are at stake. */
export const SAFE_SUN_DISTANCE_DEG = 45;

const emptyToNull = z
	.literal('')
	.transform(() => null)
	.or(z.null());

/** A number, or an empty box for "no such limit". */
function optionalNumber(low: number, high: number, unit: string) {
	return emptyToNull.or(formNumber(low, high, unit)).default(null);
}

const text = (most: number, what: string) =>
	z.string().trim().min(1, `${what} is needed.`).max(most, `At most ${most} characters.`);

const limitsSchema = z
	.object({
		sunAltMaxDeg: formNumber(-30, 0, 'degrees'),
		minAltDeg: formNumber(0, 89, 'degrees'),
		maxAltDeg: optionalNumber(1, 90, 'degrees'),
		horizon: z
			.array(
				z.object({
					azDeg: formNumber(0, 359.999, 'degrees'),
					altDeg: formNumber(0, 89, 'degrees')
				})
			)
			.max(72, 'At most 72 points.')
			.nullable()
			.default(null),
		hourAngleMaxH: optionalNumber(0.1, 12, 'hours'),
		decMinDeg: optionalNumber(-90, 90, 'degrees'),
		decMaxDeg: optionalNumber(-90, 90, 'degrees'),
		moonDistanceDeg: formNumber(0, 180, 'degrees'),
		sunDistanceDeg: formNumber(0, 180, 'degrees')
	})
	.superRefine((limits, context) => {
		const wrong = (path: (string | number)[], message: string) =>
			context.addIssue({ code: 'custom', path, message });
		if (limits.maxAltDeg !== null && limits.maxAltDeg <= limits.minAltDeg) {
			wrong(['maxAltDeg'], 'The zenith limit must lie above the lowest altitude.');
		}
		if (
			limits.decMinDeg !== null &&
			limits.decMaxDeg !== null &&
			limits.decMaxDeg <= limits.decMinDeg
		) {
			wrong(['decMaxDeg'], 'The northern limit must lie north of the southern one.');
		}
		const azimuths = new Map<number, number>();
		limits.horizon?.forEach(({ azDeg }, index) => {
			if (azimuths.has(azDeg)) {
				wrong(['horizon', index, 'azDeg'], `Azimuth ${azDeg}° is there twice.`);
			}
			azimuths.set(azDeg, index);
		});
		if (limits.horizon?.length === 1) {
			wrong(['horizon'], 'A mask needs two points or more; leave it empty for a flat horizon.');
		}
	})
	.transform((limits): TelescopeLimits => ({
		...limits,
		horizon:
			limits.horizon && limits.horizon.length > 0
				? [...limits.horizon].sort((a, b) => a.azDeg - b.azDeg)
				: null
	}));

const offset = formNumber(-10, 10, 'degrees').default(0);
const detectorSchema = z.discriminatedUnion('shape', [
	z.object({
		shape: z.literal('rectangle'),
		widthDeg: formNumber(0.01, 30, 'degrees'),
		heightDeg: formNumber(0.01, 30, 'degrees'),
		rotationDeg: formNumber(-180, 360, 'degrees').default(0),
		offsetXDeg: offset,
		offsetYDeg: offset
	}),
	z.object({
		shape: z.literal('circle'),
		radiusDeg: formNumber(0.005, 15, 'degrees'),
		offsetXDeg: offset,
		offsetYDeg: offset
	})
]) satisfies z.ZodType<Detector>;

const depthSchema = z
	.object({
		filter: text(20, 'A filter'),
		refLimitMag: formNumber(5, 30, 'mag'),
		refExposureS: formNumber(1, 7200, 's'),
		floorMag: formNumber(5, 35, 'mag'),
		extinctionMag: formNumber(0, 3, 'mag per airmass'),
		darkSkyMag: formNumber(10, 24, 'mag per square arcsecond')
	})
	.refine((depth) => depth.floorMag >= depth.refLimitMag, {
		path: ['floorMag'],
		error: 'The deepest limit can’t be brighter than the one of the reference exposure.'
	}) satisfies z.ZodType<Depth>;

/** A telescope as its form sends it. */
export const telescopeSchema = z
	.object({
		code: z
			.string()
			.trim()
			.toUpperCase()
			.pipe(z.string().regex(/^[A-Z]{3}$/, 'Three letters, A to Z.')),
		name: text(80, 'A name'),
		site: text(80, 'A site'),
		apertureM: formNumber(0.05, 40, 'm'),
		latDeg: formNumber(-90, 90, 'degrees'),
		lonDeg: formNumber(-180, 180, 'degrees, east positive'),
		heightM: formNumber(-430, 9000, 'm'),
		limits: limitsSchema,
		detectors: z
			.array(detectorSchema)
			.min(1, 'A telescope needs a detector.')
			.max(64, 'At most 64 detectors.'),
		depths: z
			.array(depthSchema)
			.min(1, 'A telescope needs a filter.')
			.max(20, 'At most 20 filters.'),
		exposureS: formNumber(1, 7200, 's'),
		overheadS: formNumber(0, 3600, 's'),
		maxTiles: formNumber(1, 200).pipe(z.number().int('Whole tiles only.')),
		observerIds: z.array(z.uuid()).default([]),
		/** Ticked when the distance to the Sun is below the safe one. */
		sunConfirmed: z.union([z.boolean(), z.literal('on').transform(() => true)]).default(false)
	})
	.superRefine((telescope, context) => {
		const { sunDistanceDeg } = telescope.limits;
		if (sunDistanceDeg < SAFE_SUN_DISTANCE_DEG && !telescope.sunConfirmed) {
			context.addIssue({
				code: 'custom',
				path: ['sunConfirmed'],
				message: `Below ${SAFE_SUN_DISTANCE_DEG}° from the Sun, eyes and detectors are at risk. Tick the box if the site has agreed to ${sunDistanceDeg}°.`
			});
		}
		const seen = new Set<string>();
		telescope.depths.forEach(({ filter }, index) => {
			if (seen.has(filter)) {
				context.addIssue({
					code: 'custom',
					path: ['depths', index, 'filter'],
					message: `Filter ${filter} is there twice.`
				});
			}
			seen.add(filter);
		});
	});
export type TelescopeInput = z.output<typeof telescopeSchema>;

/** A stretch in which the site closes the telescope; times are UTC. */
export const closureSchema = z
	.object({
		startAt: formInstant,
		endAt: formInstant,
		reason: text(200, 'A reason')
	})
	.refine(({ startAt, endAt }) => Date.parse(endAt) > Date.parse(startAt), {
		path: ['endAt'],
		error: 'The end must be after the start.'
	});
export type ClosureInput = z.output<typeof closureSchema>;

/** Instants are ISO 8601 UTC strings. */
export type ClosureView = {
	id: string;
	startAt: string;
	endAt: string;
	reason: string;
	enteredBy: string | null;
};

export type TelescopeOverview = {
	code: string;
	name: string;
	site: string;
	apertureM: number;
	latDeg: number;
	lonDeg: number;
	minAltDeg: number;
	sunAltMaxDeg: number;
	filters: string[];
	/** Area of all detectors together, square degrees. */
	fieldDeg2: number;
	/** 5-sigma limit of the first filter in its reference exposure. */
	depth: { filter: string; refLimitMag: number; refExposureS: number };
	observers: { id: string; name: string; initials: string }[];
	/** In force now, or the next one to come. */
	closure: ClosureView | null;
	closedNow: boolean;
	retired: boolean;
};

export type TelescopeDetail = TelescopeOverview & {
	settings: Omit<TelescopeInput, 'sunConfirmed'>;
	/** Those that have not ended. */
	closures: ClosureView[];
	updatedAt: string;
};
