import type { StreamClass } from '../../domain/vocabulary';
import { formatArea } from '../../domain/area';
import type { Shape } from '../../sky/regions/shape';

/** What a live alert adds, for counting; a part without a shape counts as a circle does. */
export type HeadlinePart = { streamClass: StreamClass; shapeKind: Shape['kind'] | undefined };

type Words = [one: string, many: string];
const ROUND: Record<StreamClass, Words> = {
	gamma: ['gamma circle', 'gamma circles'],
	wideXray: ['X-ray position', 'X-ray positions'],
	narrowXray: ['fine X-ray position', 'fine X-ray positions']
};
const OTHER: Record<StreamClass, Words> = {
	gamma: ['gamma region', 'gamma regions'],
	wideXray: ['X-ray region', 'X-ray regions'],
	narrowXray: ['fine X-ray region', 'fine X-ray regions']
};
const CLASSES = Object.keys(ROUND) as StreamClass[];

/** One line for a list: "1.21 deg² from 2 gamma circles and 1 X-ray position". */
export function headline(
	area90Deg2: number | null,
	parts: HeadlinePart[],
	counterpartFound: boolean
): string {
	if (area90Deg2 === null || parts.length === 0) return 'No live alert';
	const area = formatArea(area90Deg2);
	if (counterpartFound) return `${area}, counterpart found`;
	const counts = CLASSES.flatMap((name) => {
		const own = parts.filter(({ streamClass }) => streamClass === name);
		const round = own.filter(({ shapeKind }) => isRound(shapeKind)).length;
		return [counted(round, ROUND[name]), counted(own.length - round, OTHER[name])];
	}).filter((words) => words !== '');
	const list =
		counts.length > 1 ? `${counts.slice(0, -1).join(', ')} and ${counts.at(-1)}` : counts[0];
	return `${area} from ${list}`;
}

const isRound = (kind: HeadlinePart['shapeKind']) =>
	kind === undefined || kind === 'circle' || kind === 'hardCircle';

const counted = (count: number, [one, many]: Words) =>
	count === 0 ? '' : `${count} ${count === 1 ? one : many}`;
