import { union } from '../moc/moc';
import { capRadiusDeg } from './cap';
import type { JointRegion } from './jointRegion';
import { mixPoints } from './regionPoints';

/**
 * One region from several that do not overlap: the union of their areas and coverage, a mixture of their
 * points by weight, and the centre of the heaviest (of equals, the smallest), because a mean of places far
 * apart is a place where the source is not.
 */
export function keepApart(pieces: { region: JointRegion; weight: number }[]): JointRegion {
	const total = pieces.reduce((sum, piece) => sum + piece.weight, 0);
	const [main] = [...pieces].sort(
		(a, b) => b.weight - a.weight || a.region.area90Deg2 - b.region.area90Deg2
	);
	if (!main) throw new RangeError('pieces is empty; it must hold at least one region');
	const area90Deg2 = sumOf(pieces.map(({ region }) => region.area90Deg2));
	return {
		method: 'none',
		centre: main.region.centre,
		sigmaDeg: null,
		area50Deg2: sumOf(pieces.map(({ region }) => region.area50Deg2)),
		area90Deg2,
		equivalentRadiusDeg: capRadiusDeg(area90Deg2),
		moc50: union(...pieces.map(({ region }) => region.moc50)),
		moc90: union(...pieces.map(({ region }) => region.moc90)),
		points: mixPoints(
			pieces.map(({ region, weight }) => ({ points: region.points, weight: weight / total }))
		)
	};
}

function sumOf(values: number[]): number {
	return values.reduce((sum, value) => sum + value, 0);
}
