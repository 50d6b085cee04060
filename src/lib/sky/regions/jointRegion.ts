import type { Equatorial } from '../angle';
import type { MocRanges } from '../moc/moc';
import { canonicalOrder } from './canonicalOrder';
import { closedRegion } from './closedRegion';
import { keepApart } from './keepApart';
import { mapRegion } from './mapRegion';
import { meshRegion } from './meshRegion';
import { agreeingGroups, multiplyParts, prepareParts, type Part } from './parts';
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
	return regionOf(prepareParts(canonicalOrder(parts)));
}

function regionOf(parts: Part[]): JointRegion {
	const alone = mapAlone(parts);
	if (alone) return alone;
	const product = multiplyParts(parts);
	if (product.agrees) {
		return product.kind === 'fisher' ? closedRegion(product) : meshRegion(product.mesh.cells);
	}
	return keepApart(
		agreeingGroups(parts).map((group) => ({ region: regionOf(group), weight: group.length }))
	);
}

/** The region of a single map; null for all other parts. */
export function mapAlone(parts: Part[]): JointRegion | null {
	const map = parts.length === 1 ? parts[0]?.map : null;
	return map ? mapRegion(map) : null;
}
