import { toVector, type Vector } from '../vector';
import { addInQuadrature, kappaFromRadius, kappaFromSigma, sigmaFromKappa } from './containment';
import type { CircleShape } from './shape';

/** A Fisher density on the sphere: mean direction and concentration κ (0 is uniform). */
export type Fisher = { mean: Vector; kappa: number };

/** The product of Fisher densities, with what is needed to judge whether they agree. */
export type FisherProduct = {
	/** Null when the weights cancel to nothing, which leaves a uniform sky. */
	mean: Vector | null;
	/** |Σ κᵢμᵢ|. */
	kappa: number;
	/** Σ κᵢ − |Σ κᵢμᵢ|: half the χ² of the parts about their common mean; 0 when they coincide. */
	halfChi2: number;
};

/** The Fisher density of a Gaussian error circle, systematic error added in quadrature. */
export function fisherOf(shape: CircleShape): Fisher {
	const mean = toVector(shape.centre);
	const statistical = kappaFromRadius(shape.radiusDeg, shape.containment);
	const systematicDeg = shape.systematicDeg ?? 0;
	if (!(systematicDeg >= 0 && systematicDeg <= 180)) {
		throw new RangeError(`systematicDeg is ${systematicDeg}; it must be between 0 and 180`);
	}
	if (systematicDeg === 0 || statistical === 0) return { mean, kappa: statistical };
	const sigmaDeg = addInQuadrature(sigmaFromKappa(statistical), systematicDeg);
	return { mean, kappa: kappaFromSigma(sigmaDeg) };
}

/** Product of Fisher densities, κμ = Σ κᵢμᵢ; exact at arcseconds. */
export function multiplyFisher(parts: Fisher[]): FisherProduct {
	const sum = { x: 0, y: 0, z: 0 };
	let total = 0;
	for (const { mean, kappa } of parts) {
		sum.x += kappa * mean.x;
		sum.y += kappa * mean.y;
		sum.z += kappa * mean.z;
		total += kappa;
	}
	const kappa = Math.hypot(sum.x, sum.y, sum.z);
	// (Σκ)² − |Σκμ|² = Σ κᵢκⱼ |μᵢ − μⱼ|² over pairs: the plain difference loses all digits at arcseconds.
	let spread = 0;
	for (let i = 0; i < parts.length; i++) {
		for (let j = i + 1; j < parts.length; j++) spread += pairSpread(parts[i], parts[j]);
	}
	const halfChi2 = total > 0 ? spread / (total + kappa) : 0;
	if (!(kappa > 1e-9 * total) || kappa < 1e-9) return { mean: null, kappa: 0, halfChi2 };
	return {
		mean: { x: sum.x / kappa, y: sum.y / kappa, z: sum.z / kappa },
		kappa,
		halfChi2
	};
}

/**
 * ln of B = sinh w / w · Π κᵢ / sinh κᵢ, w = |Σ κᵢμᵢ|: one source against as many as there are parts
 * (Budavári & Szalay 2008, ApJ 679, 301, eq. 27); never overflows.
 */
export function logBayesFisher(parts: Fisher[]): number {
	const { kappa, halfChi2 } = multiplyFisher(parts);
	return parts.reduce((sum, part) => sum + logOverSinh(part.kappa), -halfChi2 - logOverSinh(kappa));
}

/** ln density per steradian at `direction`: κ/(2π(1 − e^(−2κ))) · e^(−κ|v − μ|²/2). */
export function logFisherAt(part: Fisher, direction: Vector): number {
	const { mean, kappa } = part;
	const x = direction.x - mean.x;
	const y = direction.y - mean.y;
	const z = direction.z - mean.z;
	return logFisherPeak(kappa) - (kappa * (x * x + y * y + z * z)) / 2;
}

/** ln of the density per steradian at the centre. */
export function logFisherPeak(kappa: number): number {
	return logOverSinh(kappa) - Math.log(4 * Math.PI);
}

/** ln(κ e^κ / sinh κ) = ln(2κ / (1 − e^(−2κ))); 0 at κ = 0. */
function logOverSinh(kappa: number): number {
	return kappa < 1e-12 ? kappa : Math.log((-2 * kappa) / Math.expm1(-2 * kappa));
}

function pairSpread(a: Fisher | undefined, b: Fisher | undefined): number {
	if (!a || !b) return 0;
	const x = a.mean.x - b.mean.x;
	const y = a.mean.y - b.mean.y;
	const z = a.mean.z - b.mean.z;
	return a.kappa * b.kappa * (x * x + y * y + z * z);
}
