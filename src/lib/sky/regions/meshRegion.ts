import type { Equatorial } from '../angle';
import { cellAreaSr } from '../healpix/healpix';
import { mocContains } from '../moc/moc';
import { angleBetweenDeg, norm, normalise, toEquatorial, type Vector } from '../vector';
import { capRadiusDeg } from './cap';
import { credibleRegion } from './credible';
import type { JointRegion } from './jointRegion';
import type { MeshCell } from './mesh';
import { meshPoints } from './meshPoints';
import type { RegionPoints } from './regionPoints';

/** The region of a normalised mesh (at least one cell). */
export function meshRegion(cells: MeshCell[]): JointRegion {
	const middle = centreOfMass(cells);
	const half = credibleRegion(cells, 0.5, middle);
	const most = credibleRegion(cells, 0.9, middle);
	const points = meshPoints(cells);
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

function centreOfMass(cells: MeshCell[]): Vector {
	const sum = { x: 0, y: 0, z: 0 };
	for (const { at, density, order } of cells) {
		const probability = density * cellAreaSr(order);
		sum.x += probability * at.x;
		sum.y += probability * at.y;
		sum.z += probability * at.z;
	}
	// A full ring or sky has its centre of mass in the middle of the Earth: any cell will do then.
	return norm(sum) > 1e-9 ? normalise(sum) : (cells[0]?.at ?? { x: 1, y: 0, z: 0 });
}

/** Of the densest cells the one nearest to `middle`: the first that any credible region takes. */
function densestCell(cells: MeshCell[], middle: Vector): Vector {
	const most = cells.reduce((greatest, cell) => Math.max(greatest, cell.density), 0);
	let best = { at: middle, distanceDeg: Infinity };
	for (const { at, density } of cells) {
		if (density < most) continue;
		const distanceDeg = angleBetweenDeg(at, middle);
		if (distanceDeg < best.distanceDeg) best = { at, distanceDeg };
	}
	return best.at;
}

function likeliestPoint(points: RegionPoints): Equatorial {
	let best = 0;
	points.probability.forEach((probability, i) => {
		if (probability > (points.probability[best] ?? 0)) best = i;
	});
	return { raDeg: points.raDeg[best] ?? 0, decDeg: points.decDeg[best] ?? 0 };
}
