import type { BoardPart, BoardRegion, BoardTransient } from '../board';
import { sinceT0 } from '../duration';
import { formatPosition, positionToPaste } from '../positionWords';
import { formatAngle, formatArea, formatOdds } from '../quantity';
import { shapeText } from '../shapeWords';
import { counted, SOURCES, type Explanation } from './explanation';

const METHODS: Record<BoardRegion['method'], string> = {
	closed:
		'All parts are Gaussian circles on the sphere. Their product is one again, in closed form: each centre counts with the inverse square of its error.',
	mesh: 'The parts’ densities are multiplied cell by cell on a multi-order HEALPix mesh and normalised.',
	none: 'The alerts do not overlap. Those that agree are joined, the rest stand beside them, each weighted by its number of alerts.'
};

const CENTRES: Record<BoardRegion['method'], string> = {
	closed: 'The mean of the alerts’ directions, each weighted by the inverse square of its error.',
	mesh: 'The mean direction of the joint density; where that lies outside the 90 % region, as in a ring, its likeliest point.',
	none: 'The centre of the weightiest of the regions that do not overlap; of equals, the smallest.'
};

/** Where the source is at 90 %, and how large that is. */
export function explainArea(transient: BoardTransient, region: BoardRegion): Explanation {
	const before = region.before;
	return {
		title: 'Joint region, 90 %',
		value: formatArea(region.area90Deg2),
		steps: [
			...partSteps(transient),
			{ label: 'Joined', text: METHODS[region.method] },
			...searchedSteps(region),
			...(region.sigmaDeg === null
				? []
				: [
						{
							label: 'Joint error',
							text: `${formatAngle(region.sigmaDeg)}, one standard deviation per axis`
						}
					]),
			{
				label: '90 % region',
				text: `The smallest area that holds 90 % of the probability: ${formatArea(region.area90Deg2)}, as large as a circle of radius ${formatAngle(region.equivalentRadiusDeg)}. Half of it is in ${formatArea(region.area50Deg2)}.`
			},
			...(region.method === 'closed'
				? []
				: [
						{
							label: 'In the chart',
							text: 'The region’s own outline, to the cells of the mesh; the darker area holds half. A circle with a broken outline stands for it, equal in area, while the outline is not there.'
						}
					]),
			...(before
				? [
						{
							label: 'Before',
							text: `${formatArea(before.area90Deg2)}; changed by ${before.cause}`
						}
					]
				: [])
		],
		assumptions: [
			'The alerts are independent measurements of one source.',
			'Each stated error holds; the stream’s systematic error is added in quadrature.',
			...(region.method === 'mesh' ? ['Areas on the mesh are good to 1 %.'] : [])
		],
		sources: [
			...(transient.parts.some(({ shape }) => shape.kind === 'circle') ? [SOURCES.fisher] : []),
			...(region.searched ? [SOURCES.search] : [])
		]
	};
}

/** What reports of nothing did to the region. */
function searchedSteps({ searched }: BoardRegion): Explanation['steps'] {
	if (!searched) return [];
	return [
		{
			label: 'Looked at, nothing seen',
			text: `${counted(searched.reports, 'report')} of nothing: where somebody looked, the density is multiplied by 1 − q × the chance of a detection there, q = 0.9. The chance that the source is too faint for all of them is ${(searched.tooFaintChance * 100).toFixed(0)} %.`
		}
	];
}

/** The joint region's centre. */
export function explainCentre(transient: BoardTransient, region: BoardRegion): Explanation {
	const { ra, dec } = formatPosition(region.centre, region.equivalentRadiusDeg);
	const { raDeg, decDeg } = region.centre;
	return {
		title: 'Centre (ICRS)',
		value: `${ra} ${dec}`,
		steps: [
			...partSteps(transient),
			{
				label: 'Centre',
				text: CENTRES[region.method]
			},
			{ label: 'In degrees', text: `${raDeg.toFixed(5)}°, ${decDeg.toFixed(5)}°` },
			{
				label: 'As copied',
				text: positionToPaste(region.centre, region.equivalentRadiusDeg)
			},
			{
				label: 'How sure',
				text: `The 90 % region is as large as a circle of radius ${formatAngle(region.equivalentRadiusDeg)}.`
			}
		],
		assumptions: ['Right ascension and declination are ICRS, without precession to date.'],
		sources: region.method === 'closed' ? [SOURCES.fisher] : []
	};
}

/** The odds that all live alerts have one source. */
export function explainAgreement(transient: BoardTransient, region: BoardRegion): Explanation {
	const assumptions = [
		'At 10 : 1 or more they agree, at 1 : 10 or less they don’t; between, a person decides.',
		'A source that one stream hears can be heard by the others.'
	];
	const title = 'Do the alerts agree?';
	if (region.logOddsAgreement === null) {
		return {
			title,
			value: 'one alert only',
			steps: [
				...partSteps(transient),
				{ label: 'Odds', text: 'They compare alerts; with one there is nothing to compare.' }
			],
			assumptions,
			sources: [SOURCES.agreement]
		};
	}
	const { verdict, ratio } = formatOdds(region.logOddsAgreement);
	return {
		title,
		value: `${verdict}, ${ratio}`,
		steps: [
			...partSteps(transient, true),
			{
				label: 'Positions',
				text: 'How much likelier these positions are for one source than for unrelated ones: 4π times the integral of the product of two densities, and so on for more (the Bayes factor).'
			},
			{
				label: 'By chance',
				text: 'Times the prior odds: one over the number of unrelated alerts that each later stream sends within its coincidence window. Rate and window are set per stream under Network.'
			},
			{ label: 'Odds of one source', text: ratio }
		],
		assumptions,
		sources: [SOURCES.agreement]
	};
}

function partSteps(transient: BoardTransient, withOdds = false): Explanation['steps'] {
	const { parts, t0 } = transient;
	if (parts.length === 0) return [{ label: 'Alerts', text: 'none is live' }];
	return parts.map((part) => ({
		label: part.streamName,
		text: `${shapeText(part.shape)}${systematicText(part)}, received ${sinceT0(Date.parse(part.receivedAt) - Date.parse(t0))} after the trigger${withOdds ? joinText(part) : ''}`
	}));
}

function systematicText({ shape }: BoardPart): string {
	if (shape.kind !== 'circle' || !shape.systematicDeg) return '';
	return ` and ${formatAngle(shape.systematicDeg)} systematic`;
}

function joinText({ membership, logOdds }: BoardPart): string {
	if (logOdds !== null) return `; joined at odds of ${formatOdds(logOdds).ratio}`;
	if (membership === 'cited')
		return '; put here because it cites, or is cited by, an alert of this one';
	if (membership === 'moved') return '; put here by a person';
	return '';
}

/** What the region is made from, in a few words, for explanations that start from it. */
export function regionInWords(transient: BoardTransient): string {
	if (!transient.region) return 'no region';
	return `${formatArea(transient.region.area90Deg2)} (90 %) from ${counted(transient.parts.length, 'live alert')}`;
}
