import type { BoardOutlook, BoardTelescope, BoardTransient } from '../board';
import { formatChance, formatPoints } from '../quantity';
import { SOURCES, utcMinute, type Explanation } from './explanation';
import { regionInWords } from './explainRegion';
import { fadeAssumptions, fadeStep } from './fadeWords';

/** Most telescopes that are named one by one. */
const NAMED = 6;

/** The chance that some telescope of the network detects the counterpart. */
export function explainNetworkCatch(
	transient: BoardTransient,
	outlook: BoardOutlook,
	telescopes: readonly BoardTelescope[]
): Explanation {
	const { order, rows } = outlook;
	const nameOf = (code: string) => telescopes.find((item) => item.code === code)?.name ?? code;
	const named = order.slice(0, NAMED).map((code, index) => ({
		label: `${index + 1}. ${nameOf(code)}`,
		text: `catches ${formatChance(rows.find((row) => row.telescopeCode === code)?.catch ?? 0)} by itself`
	}));
	return {
		title: 'Catch chance, network',
		value: formatChance(outlook.networkCatch),
		steps: [
			{ label: 'Region', text: regionInWords(transient) },
			...named,
			...(order.length > NAMED
				? [{ label: 'And', text: `${order.length - NAMED} more, each adding less` }]
				: []),
			{
				label: 'Together',
				text:
					order.length === 0
						? 'No telescope adds to it in the next 24 hours.'
						: 'The telescope that adds most is picked first, then the one that adds most to it, and so on. Sky seen twice counts once, at its better chance, so this is less than the sum.'
			},
			fadeStep(outlook),
			{ label: 'Computed', text: `at ${utcMinute(outlook.computedAt)}` }
		],
		assumptions: [
			'Every telescope starts its plan as soon as its window opens and takes all its tiles, whoever has claimed it.',
			'The weather is fine everywhere.',
			...fadeAssumptions
		],
		sources: [SOURCES.coverage, SOURCES.fade]
	};
}

/** What an hour's delay costs the network's catch. */
export function explainCostOfWaiting(outlook: BoardOutlook): Explanation {
	const later = Math.max(0, outlook.networkCatch - outlook.costOfWaitingPoints / 100);
	return {
		title: 'Cost of waiting',
		value: formatPoints(outlook.costOfWaitingPoints),
		steps: [
			{ label: 'Starting now', text: `network catch ${formatChance(outlook.networkCatch)}` },
			{
				label: 'An hour later',
				text:
					outlook.costOfWaitingPoints > 0
						? `network catch ${formatChance(later)}`
						: 'network catch not less than now'
			},
			{
				label: 'Difference',
				text: `${outlook.costOfWaitingPoints.toFixed(1)} points, a point being 0.01 of chance; never less than none`
			}
		],
		assumptions: [
			'The only difference is the start: every plan is made anew for an hour later, with a fainter counterpart and other tiles setting.'
		],
		sources: [SOURCES.coverage]
	};
}
