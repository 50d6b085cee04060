import type { Equatorial } from '../angle';
import { mocContains } from '../moc/moc';
import { angleBetweenDeg, toEquatorial, type Vector } from '../vector';
import { capRadiusDeg } from './cap';
import {
	centreOfMass,
	columnsOf,
	probabilityColumn,
	vectorAt,
	type CellColumns
} from './cellColumns';
import { credibleRegion } from './credible';
import type { JointRegion } from './jointRegion';
import type { MeshCell } from './mesh';
import { meshPoints } from './meshPoints';
import type { RegionPoints } from './regionPoints';

/** The region of a normalised mesh (at least one cell). */
export function meshRegion(cells: MeshCell[]): JointRegion {
	return columnsRegion(columnsOf(cells));
}

/** The region of normalised cells (at least one). */
export function columnsRegion(cells: CellColumns): JointRegion {
	const probability = probabilityColumn(cells);
	const middle = centreOfMass(cells, probability);
	const half = credibleRegion(cells, probability, 0.5, middle);
	const most = credibleRegion(cells, probability, 0.9, middle);
	const points = meshPoints(cells, probability);
	const mean = toEquatorial(middle);
	return {
		method: 'mesh',
		// The mean of a ring, or of two separate patches, is a place where the source is not.
		// The likeliest point may do no better: it stands for cells with a searched field between them.
		centre:
			[mean, likeliestPoint(points)].find((place) => mocContains(most.moc, place)) ??
			toEquatorial(densestCell(cells, middle)),
		sigmaDeg: null,
		area50Deg2: half.areaDeg2,
		area90Deg2: most.areaDeg2,
		equivalentRadiusDeg: capRadiusDeg(most.areaDeg2),
		moc50: half.moc,
		moc90: most.moc,
		points
	};
}

/** Of the densest cells the one nearest to `middle`: the first that any credible region takes. */
function densestCell(cells: CellColumns, middle: Vector): Vector {
	const most = cells.density.reduce((greatest, value) => Math.max(greatest, value), 0);
	let best = { at: middle, distanceDeg: Infinity };
	cells.density.forEach((value, i) => {
		if (value < most) return;
		const at = vectorAt(cells, i);
		const distanceDeg = angleBetweenDeg(at, middle);
		if (distanceDeg < best.distanceDeg) best = { at, distanceDeg };
	});
	return best.at;
}

function likeliestPoint(points: RegionPoints): Equatorial {
	let best = 0;
	points.probability.forEach((probability, i) => {
		if (probability > (points.probability[best] ?? 0)) best = i;
	});
	return { raDeg: points.raDeg[best] ?? 0, decDeg: points.decDeg[best] ?? 0 };
}
