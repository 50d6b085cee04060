import type { Vector } from '../vector';
import type { Density } from './density/density';
import { densityOf } from './density/densityOf';
import { fisherOf, logBayesFisher, multiplyFisher, type Fisher } from './fisher';
import { buildMesh, type Mesh } from './mesh';
import type { Shape } from './shape';

/** A shape made ready: its density, and its Fisher parameters where it is a Gaussian circle. */
export type Part = { density: Density; fisher: Fisher | null };

/** What the parts say together, with the two measures of whether they agree. */
export type PartProduct = { halfChi2: number; logBayes: number } & (
	{ kind: 'fisher'; mean: Vector; kappa: number } | { kind: 'mesh'; mesh: Mesh }
);

/** Checks and prepares shapes; throws a RangeError that names what is wrong. */
export function prepareParts(shapes: Shape[]): Part[] {
	return shapes.map((shape) => ({
		density: densityOf(shape),
		fisher: shape.kind === 'circle' ? fisherOf(shape) : null
	}));
}

/** The product of the parts (at least one): closed form for circles alone, else on a mesh. */
export function multiplyParts(parts: Part[]): PartProduct {
	const fisher = parts.flatMap((part) => part.fisher ?? []);
	const [first] = fisher;
	if (first && fisher.length === parts.length) {
		const { mean, kappa, halfChi2 } = multiplyFisher(fisher);
		// Weights that cancel leave a uniform sky, for which any mean does.
		return {
			kind: 'fisher',
			mean: mean ?? first.mean,
			kappa,
			halfChi2,
			logBayes: logBayesFisher(fisher)
		};
	}
	const mesh = buildMesh(parts.map((part) => part.density));
	return {
		kind: 'mesh',
		mesh,
		halfChi2: mesh.halfChi2,
		logBayes: mesh.logIntegral + (parts.length - 1) * Math.log(4 * Math.PI)
	};
}
