import { fadeMag } from '../../sky/catch/fade';
import type { BoardOutlook, BoardOutlookRow, BoardTelescope, BoardTransient } from '../board';
import { sinceT0 } from '../duration';
import { formatChance, formatShare } from '../quantity';
import { counted, SOURCES, utcMinute, type Explanation } from './explanation';
import { regionInWords } from './explainRegion';
import { fadeAssumptions, fadeStep } from './fadeWords';
import { forbiddenText, limitsText, windowText } from './limitTexts';

/** Most windows that are told one by one. */
const TOLD = 3;

export type RowContext = {
	transient: BoardTransient;
	outlook: BoardOutlook;
	row: BoardOutlookRow;
	telescope: BoardTelescope | undefined;
};

/** Catch, reach and opening of one telescope, and where the target stands then. */
export function explainRow(context: RowContext, opens: string): Explanation[] {
	const pointing = explainPointing(context);
	return [
		explainCatch(context),
		explainReach(context),
		explainOpens(context, opens),
		...(pointing ? [pointing] : [])
	];
}

/** The chance that one telescope's tile plan detects the counterpart. */
export function explainCatch({ transient, outlook, row, telescope }: RowContext): Explanation {
	const { tiles } = row;
	const inTiles = tiles.reduce((sum, tile) => sum + tile.probability, 0);
	const first = tiles[0];
	const last = tiles.at(-1);
	const planned =
		first && last
			? [
					{
						label: 'Plan',
						text: `${counted(tiles.length, 'tile')} of ${first.exposureS} s, ${utcMinute(first.startAt)} to ${endMinute(last)}${telescope && tiles.length > 1 ? `, ${telescope.overheadS} s between them` : ''}, holding ${formatShare(inTiles)} of the probability`
					},
					{ label: 'First tile', text: firstTileText(first, transient, outlook) },
					{
						label: 'Sum',
						text: `Probability inside each tile times its chance of a detection, added up: ${formatChance(row.catch)}`
					}
				]
			: [{ label: 'Plan', text: `No tile: ${whyNoTile(row, telescope)}` }];
	return {
		title: 'Catch',
		value: formatChance(row.catch),
		steps: [{ label: 'Region', text: regionInWords(transient) }, ...planned, fadeStep(outlook)],
		assumptions: [
			'The telescope starts as soon as its window opens, takes all tiles, and the weather is fine.',
			'Detected means brighter than the 5σ limit of the exposure.',
			...fadeAssumptions
		],
		sources: [SOURCES.fade, SOURCES.airmass, SOURCES.moonlight]
	};
}

function firstTileText(
	tile: BoardOutlookRow['tiles'][number],
	transient: BoardTransient,
	{ fade }: BoardOutlook
): string {
	const t0Ms = Date.parse(transient.t0);
	// The chance is that of the middle of the exposure.
	const middleMs = Date.parse(tile.startAt) + tile.exposureS * 500;
	const mag = fade
		? `, the mean counterpart is then R ${fadeMag(fade, t0Ms, middleMs).toFixed(1)}`
		: '';
	return `${formatShare(tile.probability)} of the probability, ${sinceT0(middleMs - t0Ms)} after the trigger${mag}; chance of a detection if it is there ${formatChance(tile.detectChance)}`;
}

function endMinute(tile: BoardOutlookRow['tiles'][number]): string {
	return utcMinute(new Date(Date.parse(tile.startAt) + tile.exposureS * 1000).toISOString());
}

function whyNoTile(row: BoardOutlookRow, telescope: BoardTelescope | undefined): string {
	if (row.forbidden) return forbiddenText(row.forbidden, telescope);
	return 'no part of the region can be exposed in a window.';
}

/** The share of the region's probability that one telescope can observe. */
export function explainReach({ transient, row, telescope }: RowContext): Explanation {
	return {
		title: 'Reach',
		value: formatShare(row.reach),
		steps: [
			{ label: 'Region', text: regionInWords(transient) },
			...(telescope ? [{ label: 'Limits', text: limitsText(telescope) }] : []),
			{
				label: 'Share',
				text: `${formatShare(row.reach)} of the probability is inside all limits at some time in the next 24 hours, whatever the field of view and the depth.`
			}
		],
		assumptions: ['Looked at every 10 minutes: what is up for less may be missed.'],
		sources: []
	};
}

/** When one telescope's window opens; `opens` as the table shows it. */
export function explainOpens({ outlook, row, telescope }: RowContext, opens: string): Explanation {
	const ahead = row.windows.filter(({ endAt }) => endAt > outlook.computedAt);
	const windows = ahead.slice(0, TOLD).map((window, index) => ({
		label: ahead.length === 1 ? 'Window' : `Window ${index + 1}`,
		text: windowText(window)
	}));
	const more = ahead.length - windows.length;
	return {
		title: 'Opens',
		value: opens,
		steps: [
			...(telescope ? [{ label: 'Limits', text: limitsText(telescope) }] : []),
			...(telescope?.closed
				? [
						{
							label: 'Closed',
							text: `by the site until ${utcMinute(telescope.closed.until)}: ${telescope.closed.reason}`
						}
					]
				: []),
			...windows,
			...(more > 0 ? [{ label: 'And', text: counted(more, 'later window') }] : []),
			...(row.forbidden
				? [{ label: 'Why not', text: forbiddenText(row.forbidden, telescope) }]
				: []),
			{ label: 'Computed', text: `at ${utcMinute(outlook.computedAt)}, for 24 hours` }
		],
		assumptions: [
			'A window is open while at least one tile of the plan is inside all limits; how close a forbidden telescope comes is for the region’s centre.',
			'No refraction. Edges are found to one second, with UT1 taken as UTC.'
		],
		sources: []
	};
}

/** Altitude, airmass, Moon and limiting magnitude when the window opens; null without a window. */
export function explainPointing({ outlook, row, telescope }: RowContext): Explanation | null {
	const { atOpening, opensAt } = row;
	if (!atOpening || opensAt === null) return null;
	const { altDeg, azDeg, airmass, moonAltDeg, moonDistanceDeg, moonIlluminated } = atOpening;
	const from = opensAt > outlook.computedAt ? opensAt : outlook.computedAt;
	return {
		title: 'Altitude, airmass, Moon and limit',
		value: `${Math.round(altDeg)}°, ${airmass.toFixed(2)}`,
		steps: [
			{ label: 'When', text: `${utcMinute(from)}, for the region’s centre` },
			{
				label: 'Altitude',
				text: `${altDeg.toFixed(1)}°, azimuth ${azDeg.toFixed(1)}° from north through east`
			},
			{ label: 'Airmass', text: airmass.toFixed(2) },
			{
				label: 'Moon',
				text:
					moonAltDeg > 0
						? `${Math.round(moonDistanceDeg)}° away, ${Math.round(moonAltDeg)}° up, ${formatShare(moonIlluminated)} lit`
						: 'below the horizon'
			},
			{ label: 'Sun', text: `${Math.round(atOpening.sunDistanceDeg)}° away` },
			{ label: 'Limit, 5σ', text: limitText(atOpening, telescope) }
		],
		assumptions: [
			'Precession, nutation and annual aberration are applied; refraction is not.',
			'Sky-limited exposures: the limit deepens by 1.25 mag per factor of ten in time and loses half of what the sky brightens, down to a floor (common practice, no source).'
		],
		sources: [SOURCES.airmass, SOURCES.moonlight]
	};
}

function limitText(
	{ limitMag, airmass }: NonNullable<BoardOutlookRow['atOpening']>,
	telescope: BoardTelescope | undefined
): string {
	if (!telescope) return `${limitMag.toFixed(1)} mag`;
	const { depth, exposureS } = telescope;
	const { filter, refLimitMag, refExposureS, extinctionMag, floorMag } = depth;
	const exposure = 1.25 * Math.log10(exposureS / refExposureS);
	const extinction = extinctionMag * (airmass - 1);
	const dark = refLimitMag + exposure - extinction;
	const capped = Math.min(dark, floorMag);
	const moon = capped - limitMag;
	return [
		`${filter} ${limitMag.toFixed(1)} in ${exposureS} s: ${refLimitMag.toFixed(1)} in ${refExposureS} s at the zenith, ${signed(exposure)} for the exposure, ${signed(-extinction)} for the airmass (${extinctionMag} mag each)`,
		moon >= 0.05 ? `, ${signed(-moon)} for moonlight` : '',
		dark > floorMag ? `; no exposure passes ${floorMag.toFixed(1)}` : ''
	].join('');
}

function signed(mag: number): string {
	const text = Math.abs(mag).toFixed(2);
	return `${mag < 0 && text !== '0.00' ? '−' : '+'}${text}`;
}
