import type { Equatorial } from '../angle';
import type { MocRanges } from '../moc/moc';
import { canonicalOrder } from './canonicalOrder';
import { closedRegion } from './closedRegion';
import { fisherParts, logBayesFisher, multiplyFisher, type Fisher } from './fisher';
import { keepApart } from './keepApart';
import { contradicts, linkedGroups } from './overlap';
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
	const ordered = canonicalOrder(parts);
	const fisher = fisherParts(ordered);
	if (!fisher) throw new RangeError('not yet');
	return jointFisher(fisher);
}

function jointFisher(parts: Fisher[]): JointRegion {
	const [first] = parts;
	if (!first) throw new RangeError('parts is empty; it must hold at least one shape');
	const product = multiplyFisher(parts);
	if (!contradicts(parts.length, product.halfChi2, logBayesFisher(parts))) {
		return closedRegion({ mean: product.mean ?? first.mean, kappa: product.kappa });
	}
	const agree = (i: number, j: number) => {
		const pair = [parts[i], parts[j]].filter((part) => part !== undefined);
		return !contradicts(pair.length, multiplyFisher(pair).halfChi2, logBayesFisher(pair));
	};
	const groups = linkedGroups(parts.length, agree).map((group) =>
		group.flatMap((i) => parts[i] ?? [])
	);
	// A chain of parts that agree in pairs and contradict each other as a whole has no best subset: all stand alone.
	const apart = groups.length > 1 ? groups : parts.map((part) => [part]);
	return keepApart(apart.map((group) => ({ region: jointFisher(group), weight: group.length })));
}
