import type { StreamClass } from '../../domain/vocabulary';
import { formatArea } from '../../domain/area';

const PART_WORDS: Record<StreamClass, [one: string, many: string]> = {
	gamma: ['gamma circle', 'gamma circles'],
	wideXray: ['X-ray position', 'X-ray positions'],
	narrowXray: ['fine X-ray position', 'fine X-ray positions']
};

/** One line for a list: "1.21 deg² from 2 gamma circles and 1 X-ray position". */
export function headline(
	area90Deg2: number | null,
	classes: StreamClass[],
	counterpartFound: boolean
): string {
	if (area90Deg2 === null || classes.length === 0) return 'No live alert';
	const area = formatArea(area90Deg2);
	if (counterpartFound) return `${area}, counterpart found`;
	const counts = (Object.keys(PART_WORDS) as StreamClass[])
		.map((name) => ({ name, count: classes.filter((item) => item === name).length }))
		.filter(({ count }) => count > 0)
		.map(({ name, count }) => `${count} ${PART_WORDS[name][count === 1 ? 0 : 1]}`);
	const list =
		counts.length > 1 ? `${counts.slice(0, -1).join(', ')} and ${counts.at(-1)}` : counts[0];
	return `${area} from ${list}`;
}
