import type { Depth, Detector, TelescopeLimits } from '../../sky/visibility/telescope';
import type { Transaction } from '../db/database';
import { closure, telescope, telescopeObserver } from '../db/schema/network';
import type { SeededPeople } from './demoPeople';

export type DemoTelescope = {
	code: string;
	name: string;
	site: string;
	apertureM: number;
	latDeg: number;
	lonDeg: number;
	heightM: number;
	limits: TelescopeLimits;
	detectors: Detector[];
	depths: Depth[];
	exposureS: number;
	overheadS: number;
	maxTiles: number;
};

/** Extinction and dark sky are typical of good sites; from memory. */
const BANDS: Record<string, { gain: number; extinctionMag: number; darkSkyMag: number }> = {
	g: { gain: 0.4, extinctionMag: 0.18, darkSkyMag: 22.0 },
	r: { gain: 0, extinctionMag: 0.1, darkSkyMag: 21.1 },
	i: { gain: -0.5, extinctionMag: 0.06, darkSkyMag: 20.0 },
	z: { gain: -1.3, extinctionMag: 0.05, darkSkyMag: 18.9 },
	V: { gain: 0.1, extinctionMag: 0.13, darkSkyMag: 21.7 },
	R: { gain: 0, extinctionMag: 0.1, darkSkyMag: 20.9 },
	clear: { gain: 0.5, extinctionMag: 0.13, darkSkyMag: 21.0 }
};

const REFERENCE_EXPOSURE_S = 60;
/** Invented: a 1 m telescope reaches R = 20.5 at 5 sigma in 60 s; a background-limited depth grows as 2.5 log D. */
const ONE_METRE_LIMIT_MAG = 20.5;

function depthsOf(apertureM: number, filters: string[]): Depth[] {
	return filters.map((filter) => {
		const { gain, extinctionMag, darkSkyMag } = BANDS[filter]!;
		const refLimitMag = round(ONE_METRE_LIMIT_MAG + 2.5 * Math.log10(apertureM) + gain);
		return {
			filter,
			refLimitMag,
			refExposureS: REFERENCE_EXPOSURE_S,
			floorMag: round(refLimitMag + 3),
			extinctionMag,
			darkSkyMag
		};
	});
}

const round = (value: number) => Math.round(value * 100) / 100;

const LIMITS: TelescopeLimits = {
	sunAltMaxDeg: -12,
	minAltDeg: 20,
	maxAltDeg: null,
	horizon: null,
	hourAngleMaxH: null,
	decMinDeg: null,
	decMaxDeg: null,
	moonDistanceDeg: 25,
	sunDistanceDeg: 45
};

function rectangle(widthDeg: number, heightDeg: number, rotationDeg = 0): Detector {
	return { shape: 'rectangle', widthDeg, heightDeg, rotationDeg, offsetXDeg: 0, offsetYDeg: 0 };
}

/** Four equal detectors around the pointing with a gap between them. */
function mosaic(sideDeg: number, gapDeg: number): Detector[] {
	const reachDeg = (sideDeg + gapDeg) / 2;
	return [-1, 1].flatMap((x) =>
		[-1, 1].map((y) => ({
			...rectangle(sideDeg, sideDeg),
			offsetXDeg: x * reachDeg,
			offsetYDeg: y * reachDeg
		}))
	);
}

const disc = (radiusDeg: number): Detector => ({
	shape: 'circle',
	radiusDeg,
	offsetXDeg: 0,
	offsetYDeg: 0
});

type Plan = Omit<DemoTelescope, 'name' | 'limits' | 'depths'> & {
	limits?: Partial<TelescopeLimits>;
	filters: string[];
};

function demoTelescope({ limits, filters, ...plan }: Plan): DemoTelescope {
	return {
		...plan,
		name: `${plan.site} ${plan.apertureM.toFixed(1)} m`,
		limits: { ...LIMITS, ...limits },
		depths: depthsOf(plan.apertureM, filters)
	};
}

/** Invented for the demo: sites, telescopes and their limits. */
// prettier-ignore
export const DEMO_TELESCOPES: readonly DemoTelescope[] = [
	demoTelescope({ code: 'ALM', site: 'Cerro Almendra', apertureM: 1.5, latDeg: -28.31, lonDeg: -69.92, heightM: 2480,
		limits: { maxAltDeg: 87, sunAltMaxDeg: -12 }, detectors: [rectangle(0.75, 0.75)],
		filters: ['r', 'g', 'i', 'z'], exposureS: 120, overheadS: 25, maxTiles: 24 }),
	demoTelescope({ code: 'DRK', site: 'Drakenskop', apertureM: 1.0, latDeg: -31.14, lonDeg: 21.87, heightM: 1760,
		limits: { minAltDeg: 25 }, detectors: mosaic(0.95, 0.06),
		filters: ['r', 'g', 'i'], exposureS: 90, overheadS: 18, maxTiles: 30 }),
	demoTelescope({ code: 'RDV', site: 'Roque del Viento', apertureM: 2.0, latDeg: 27.92, lonDeg: -17.23, heightM: 2310,
		limits: { maxAltDeg: 88, sunAltMaxDeg: -15 }, detectors: [rectangle(0.45, 0.45, 45)],
		filters: ['r', 'g', 'i', 'z'], exposureS: 150, overheadS: 40, maxTiles: 20 }),
	demoTelescope({ code: 'SPL', site: 'Sierra Pilón', apertureM: 0.8, latDeg: 30.18, lonDeg: -114.87, heightM: 2790,
		limits: { hourAngleMaxH: 4.5, decMinDeg: -35, decMaxDeg: 72 }, detectors: [rectangle(1.1, 1.1)],
		filters: ['R', 'V'], exposureS: 90, overheadS: 15, maxTiles: 30 }),
	demoTelescope({ code: 'KAI', site: 'Kaimoku Ridge', apertureM: 0.6, latDeg: 20.58, lonDeg: -156.11, heightM: 3020,
		limits: { hourAngleMaxH: 5.2, decMinDeg: -50, decMaxDeg: 80 }, detectors: [disc(1.1)],
		filters: ['R', 'V', 'clear'], exposureS: 60, overheadS: 12, maxTiles: 36 }),
	demoTelescope({ code: 'WIR', site: 'Mount Wirrabel', apertureM: 1.3, latDeg: -30.42, lonDeg: 148.23, heightM: 1180,
		limits: { minAltDeg: 25 }, detectors: [rectangle(1.6, 0.8, 12)],
		filters: ['r', 'g', 'i'], exposureS: 120, overheadS: 22, maxTiles: 28 }),
	demoTelescope({ code: 'SKA', site: 'Skarvfjell', apertureM: 0.5, latDeg: 69.61, lonDeg: 20.31, heightM: 640,
		limits: { sunAltMaxDeg: -10, horizon: [
			{ azDeg: 0, altDeg: 12 }, { azDeg: 60, altDeg: 15 }, { azDeg: 110, altDeg: 24 }, { azDeg: 160, altDeg: 31 },
			{ azDeg: 200, altDeg: 28 }, { azDeg: 250, altDeg: 18 }, { azDeg: 310, altDeg: 11 }
		] },
		detectors: [rectangle(1.3, 0.9)], filters: ['R', 'V', 'clear'], exposureS: 60, overheadS: 12, maxTiles: 30 }),
	demoTelescope({ code: 'PUN', site: 'Puna Larga', apertureM: 4.0, latDeg: -23.41, lonDeg: -66.78, heightM: 4150,
		limits: { minAltDeg: 30, maxAltDeg: 86, sunAltMaxDeg: -18, moonDistanceDeg: 30 }, detectors: [disc(0.14)],
		filters: ['r', 'g', 'i', 'z'], exposureS: 180, overheadS: 60, maxTiles: 8 }),
	demoTelescope({ code: 'ASR', site: 'Jebel Asra', apertureM: 1.2, latDeg: 23.57, lonDeg: 57.14, heightM: 1930,
		limits: { horizon: [
			{ azDeg: 0, altDeg: 22 }, { azDeg: 90, altDeg: 20 }, { azDeg: 130, altDeg: 33 }, { azDeg: 170, altDeg: 26 },
			{ azDeg: 270, altDeg: 20 }
		] },
		detectors: [rectangle(0.7, 0.5)], filters: ['r', 'g', 'i'], exposureS: 120, overheadS: 20, maxTiles: 24 }),
	demoTelescope({ code: 'SHK', site: 'Shikhar Mal', apertureM: 0.7, latDeg: 17.42, lonDeg: 76.83, heightM: 930,
		limits: { hourAngleMaxH: 5, decMinDeg: -45, decMaxDeg: 78, minAltDeg: 25 }, detectors: [rectangle(0.6, 0.6)],
		filters: ['R', 'V'], exposureS: 120, overheadS: 20, maxTiles: 20 }),
	demoTelescope({ code: 'TSA', site: 'Tsagaan Nuruu', apertureM: 1.0, latDeg: 46.77, lonDeg: 103.42, heightM: 2120,
		limits: { hourAngleMaxH: 6, decMinDeg: -25 }, detectors: [rectangle(0.9, 0.9)],
		filters: ['r', 'g', 'i'], exposureS: 90, overheadS: 18, maxTiles: 28 }),
	demoTelescope({ code: 'KOW', site: 'Kōwhai Saddle', apertureM: 0.4, latDeg: -43.64, lonDeg: 170.92, heightM: 1020,
		limits: { minAltDeg: 18 }, detectors: [rectangle(2.2, 1.5)],
		filters: ['clear', 'R', 'V'], exposureS: 60, overheadS: 10, maxTiles: 40 }),
	demoTelescope({ code: 'DVE', site: 'Dome Ventus', apertureM: 0.5, latDeg: -75.04, lonDeg: 98.26, heightM: 3310,
		limits: { sunAltMaxDeg: -9, minAltDeg: 30 }, detectors: [rectangle(1.2, 1.2)],
		filters: ['R', 'i'], exposureS: 90, overheadS: 15, maxTiles: 30 })
];

/** Inserts the telescopes and who works with them; answers their ids by code. */
export async function seedTelescopes(
	tx: Transaction,
	people: SeededPeople,
	at: Date
): Promise<Map<string, string>> {
	const rows = await tx
		.insert(telescope)
		.values(DEMO_TELESCOPES.map((one) => ({ ...one, updatedAt: at })))
		.returning({ id: telescope.id, code: telescope.code });
	const ids = new Map(rows.map(({ id, code }) => [code, id]));
	await tx
		.insert(telescopeObserver)
		.values(
			[...people.values()].flatMap(({ id, person }) =>
				(person.telescopes ?? []).map((code) => ({ telescopeId: ids.get(code)!, personId: id }))
			)
		);
	return ids;
}

const HOUR_MS = 3_600_000;

/** One telescope closed now and one to be closed in some days, entered by people who work there. */
export async function seedClosures(
	tx: Transaction,
	people: SeededPeople,
	ids: Map<string, string>,
	nowMs: number
): Promise<void> {
	const closed = [
		{ code: 'SHK', by: 'BF', fromH: -3, toH: 20, reason: 'Dust storm' },
		{ code: 'RDV', by: 'BA', fromH: 76, toH: 148, reason: 'Mirror aluminising' }
	];
	await tx.insert(closure).values(
		closed.map(({ code, by, fromH, toH, reason }) => ({
			telescopeId: ids.get(code)!,
			during: {
				start: new Date(nowMs + fromH * HOUR_MS),
				end: new Date(nowMs + toH * HOUR_MS)
			},
			reason,
			enteredBy: people.get(by)!.id,
			enteredAt: new Date(nowMs - 4 * HOUR_MS)
		}))
	);
}
