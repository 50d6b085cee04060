import type { Vector } from '../vector';
import type { Density } from './density/density';
import { densityOf } from './density/densityOf';
import { mapDensity } from './density/mapDensity';
import { sortedMap, type SortedMap } from './density/sortedMap';
import { fisherOf, logBayesFisher, multiplyFisher, type Fisher } from './fisher';
import { buildMesh, type Mesh } from './mesh';
import { contradicts, linkedGroups } from './overlap';
import type { Shape } from './shape';

/** A shape made ready: its density, its Fisher parameters where it is a Gaussian circle, its cells if a map. */
export type Part = { density: Density; fisher: Fisher | null; map: SortedMap | null };

/** What the parts say together, with the two measures of whether they agree. */
export type PartProduct = { halfChi2: number; logBayes: number; agrees: boolean } & (
	{ kind: 'fisher'; mean: Vector; kappa: number } | { kind: 'mesh'; mesh: Mesh }
);

/** Checks and prepares shapes; throws a RangeError that names what is wrong. */
export function prepareParts(shapes: Shape[]): Part[] {
	return shapes.map((shape) => {
		if (shape.kind === 'map') {
			const map = sortedMap(shape);
			return { density: mapDensity(map), fisher: null, map };
		}
		const fisher = shape.kind === 'circle' ? fisherOf(shape) : null;
		return { density: densityOf(shape), fisher, map: null };
	});
}

/** The product of the parts (at least one): closed form for circles alone, else on a mesh. */
export function multiplyParts(parts: Part[]): PartProduct {
	const fisher = parts.flatMap((part) => part.fisher ?? []);
	const [first] = fisher;
	if (first && fisher.length === parts.length) {
		const { mean, kappa, halfChi2 } = multiplyFisher(fisher);
		// Weights that cancel leave a uniform sky, for which any mean does.
		return judged({ kind: 'fisher', mean: mean ?? first.mean, kappa }, parts.length, {
			halfChi2,
			logBayes: logBayesFisher(fisher)
		});
	}
	const mesh = buildMesh(parts.map((part) => part.density));
	return judged({ kind: 'mesh', mesh }, parts.length, {
		halfChi2: mesh.halfChi2,
		logBayes: mesh.logIntegral + (parts.length - 1) * Math.log(4 * Math.PI)
	});
}

/**
 * The parts of a contradiction, in at least two groups: those linked by agreeing in pairs. A group agrees
 * as a whole, or else each of its parts stands alone, because a chain has no best subset.
 */
export function agreeingGroups(parts: Part[]): Part[][] {
	const pair = (i: number, j: number) => [parts[i], parts[j]].filter((part) => part !== undefined);
	return linkedGroups(parts.length, (i, j) => multiplyParts(pair(i, j)).agrees)
		.map((group) => group.flatMap((i) => parts[i] ?? []))
		.flatMap((group) => (multiplyParts(group).agrees ? [group] : group.map((part) => [part])));
}

function judged<Content>(
	content: Content,
	count: number,
	measures: { halfChi2: number; logBayes: number }
) {
	const agrees = !contradicts(count, measures.halfChi2, measures.logBayes);
	return { ...content, ...measures, agrees };
}
