import type { Equatorial } from '../angle';
import type { MocRanges } from '../moc/moc';
import { canonicalOrder } from './canonicalOrder';
import { closedRegion } from './closedRegion';
import { keepApart } from './keepApart';
import { meshRegion } from './meshRegion';
import { contradicts, linkedGroups } from './overlap';
import { multiplyParts, prepareParts, type Part, type PartProduct } from './parts';
import type { RegionPoints } from './regionPoints';
import type { Shape } from './shape';

export type { MocRanges } from '../moc/moc';
export type { RegionPoints } from './regionPoints';

/** Where the source can be, given every live part. */
export type JointRegion = {
	/** `closed`: all parts are Fisher; `mesh`: multi-order HEALPix cells; `none`: the parts do not overlap. */
	method: 'closed' | 'mesh' | 'none';
	centre: Equatorial;
	/** Standard deviation per axis of the equivalent Fisher density; null for a mesh. */
	sigmaDeg: number | null;
	area50Deg2: number;
	area90Deg2: number;
	/** Radius of the cap with the area of the 90 % region. */
	equivalentRadiusDeg: number;
	moc50: MocRanges;
	moc90: MocRanges;
	points: RegionPoints;
};

/**
 * Where the source can be, given all `parts` (at least one): joint density ∝ Π pᵢ, whatever their order.
 * Circles by the closed form κμ = Σ κᵢμᵢ, areas exact; other shapes on a mesh, areas to 1 %. Parts that
 * contradict each other are kept apart (`none`): those that agree are joined, the rest stand beside them,
 * each weighted by the number of its parts.
 */
export function jointRegion(parts: Shape[]): JointRegion {
	if (parts.length === 0) throw new RangeError('parts is empty; it must hold at least one shape');
	const joint = combine(prepareParts(canonicalOrder(parts)));
	return joint.region();
}

type Combination = { agrees: boolean; region: () => JointRegion };

function combine(parts: Part[]): Combination {
	const product = multiplyParts(parts);
	if (!contradicts(parts.length, product.halfChi2, product.logBayes)) {
		return { agrees: true, region: () => regionOf(product) };
	}
	return { agrees: false, region: () => regionApart(parts) };
}

function regionOf(product: PartProduct): JointRegion {
	return product.kind === 'fisher' ? closedRegion(product) : meshRegion(product.mesh.cells);
}

function regionApart(parts: Part[]): JointRegion {
	const pair = (i: number, j: number) => [parts[i], parts[j]].filter((part) => part !== undefined);
	const groups = linkedGroups(parts.length, (i, j) => combine(pair(i, j)).agrees).map((group) =>
		group.flatMap((i) => parts[i] ?? [])
	);
	// A chain that agrees pair by pair and contradicts itself as a whole has no best subset: all stand alone.
	const apart = groups.length > 1 ? groups : parts.map((part) => [part]);
	return keepApart(
		apart.map((group) => ({ region: combine(group).region(), weight: group.length }))
	);
}
