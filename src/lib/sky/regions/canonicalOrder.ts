import type { Equatorial } from '../angle';
import type { Shape } from './shape';

/** The parts in an order that does not depend on arrival, so that sums round the same way every time. */
export function canonicalOrder(parts: Shape[]): Shape[] {
	return parts
		.map((part) => ({ part, key: keyOf(part) }))
		.sort((a, b) => compareKeys(a.key, b.key))
		.map(({ part }) => part);
}

const KIND_RANK = { circle: 0, hardCircle: 1, ellipse: 2, annulus: 3, polygon: 4, map: 5 } as const;

function keyOf(part: Shape): ArrayLike<number>[] {
	const rank = [KIND_RANK[part.kind]];
	switch (part.kind) {
		case 'circle':
			return [
				[...rank, ...at(part.centre), part.radiusDeg, part.containment, part.systematicDeg ?? 0]
			];
		case 'hardCircle':
			return [[...rank, ...at(part.centre), part.radiusDeg]];
		case 'ellipse':
			return [
				[
					...rank,
					...at(part.centre),
					part.semiMajorDeg,
					part.semiMinorDeg,
					part.positionAngleDeg,
					part.containment
				]
			];
		case 'annulus':
			return [[...rank, ...at(part.centre), part.radiusDeg, part.halfWidthDeg, part.containment]];
		case 'polygon':
			return [[...rank, ...part.vertices.flatMap(at)]];
		case 'map':
			return [rank, part.uniq, part.density];
	}
}

function at(position: Equatorial): [number, number] {
	return [position.raDeg, position.decDeg];
}

function compareKeys(a: ArrayLike<number>[], b: ArrayLike<number>[]): number {
	for (let part = 0; part < Math.min(a.length, b.length); part++) {
		const left = a[part] ?? [];
		const right = b[part] ?? [];
		if (left === right) continue;
		const length = Math.min(left.length, right.length);
		for (let i = 0; i < length; i++) {
			const difference = (left[i] ?? 0) - (right[i] ?? 0);
			if (difference !== 0) return difference;
		}
		if (left.length !== right.length) return left.length - right.length;
	}
	return a.length - b.length;
}
