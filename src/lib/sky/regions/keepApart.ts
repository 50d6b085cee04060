import { mocAreaDeg2, union, type MocRanges } from '../moc/moc';
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
	const half = together(
		pieces.map(({ region }) => ({ areaDeg2: region.area50Deg2, moc: region.moc50 }))
	);
	const most = together(
		pieces.map(({ region }) => ({ areaDeg2: region.area90Deg2, moc: region.moc90 }))
	);
	return {
		method: 'none',
		centre: main.region.centre,
		sigmaDeg: null,
		area50Deg2: half.areaDeg2,
		area90Deg2: most.areaDeg2,
		equivalentRadiusDeg: capRadiusDeg(most.areaDeg2),
		moc50: half.moc,
		moc90: most.moc,
		points: mixPoints(
			pieces.map(({ region, weight }) => ({ points: region.points, weight: weight / total }))
		)
	};
}

/** Coverage of all pieces; their exact areas, less what their coverage maps have in common. */
function together(pieces: { areaDeg2: number; moc: MocRanges }[]): {
	areaDeg2: number;
	moc: MocRanges;
} {
	const moc = union(...pieces.map((piece) => piece.moc));
	const covered = pieces.reduce((sum, piece) => sum + mocAreaDeg2(piece.moc), 0);
	const sum = pieces.reduce((total, piece) => total + piece.areaDeg2, 0);
	const largest = Math.max(...pieces.map((piece) => piece.areaDeg2));
	return { areaDeg2: Math.max(largest, sum - (covered - mocAreaDeg2(moc))), moc };
}
