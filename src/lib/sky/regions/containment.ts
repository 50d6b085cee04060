import { DEG_PER_RAD, RAD_PER_DEG, requireInRange, SKY_DEG2 } from '../angle';

/** Concentration of the Fisher density with `sigmaDeg` per axis: κ = 1/σ², σ in radians (R. A. Fisher 1953, Proc. R. Soc. A 217, 295). */
export function kappaFromSigma(sigmaDeg: number): number {
	if (!(sigmaDeg > 0)) throw new RangeError(`sigmaDeg is ${sigmaDeg}; it must be above 0`);
	const sigmaRad = sigmaDeg * RAD_PER_DEG;
	return 1 / (sigmaRad * sigmaRad);
}

/** Inverse of `kappaFromSigma`; Infinity for κ = 0 (uniform on the sphere). */
export function sigmaFromKappa(kappa: number): number {
	return DEG_PER_RAD / Math.sqrt(kappa);
}

/** Radius over σ of the circle that holds `containment` of a flat 2-D Gaussian: √(−2 ln(1 − c)). */
export function containmentFactor2d(containment: number): number {
	requireContainment(containment);
	return Math.sqrt(-2 * Math.log1p(-containment));
}

/** Half-width over σ of the interval that holds `containment` of a 1-D Gaussian, to 1e-12. */
export function containmentFactor1d(containment: number): number {
	requireContainment(containment);
	let low = 0;
	let high = 10;
	for (let step = 0; step < 60; step++) {
		const middle = (low + high) / 2;
		if (gaussianWithin(middle) < containment) low = middle;
		else high = middle;
	}
	return (low + high) / 2;
}

/**
 * κ of the Fisher density whose cap of `radiusDeg` holds `containment`, from the exact cap integral
 * c = (1 − e^(−κ(1 − cos r))) / (1 − e^(−2κ)); 0 where even a uniform sky would put that share into the cap.
 */
export function kappaFromRadius(radiusDeg: number, containment: number): number {
	requireContainment(containment);
	if (!(radiusDeg > 0 && radiusDeg <= 180)) {
		throw new RangeError(`radiusDeg is ${radiusDeg}; it must be above 0 and at most 180`);
	}
	const versine = 2 * Math.sin((radiusDeg * RAD_PER_DEG) / 2) ** 2;
	if (versine / 2 >= containment) return 0;
	// Without the antipodal term, which is below 1e-17 for κ > 20, κ is explicit; it is the upper bound otherwise.
	const explicit = -Math.log1p(-containment) / versine;
	if (explicit > 20) return explicit;
	let low = 0;
	let high = explicit;
	for (let step = 0; step < 200 && high - low > 1e-15 * high; step++) {
		const middle = (low + high) / 2;
		if (Math.expm1(-middle * versine) / Math.expm1(-2 * middle) < containment) low = middle;
		else high = middle;
	}
	return (low + high) / 2;
}

/** σ per axis, degrees, of the Fisher density whose cap of `radiusDeg` holds `containment`. */
export function sigmaFromRadius(radiusDeg: number, containment: number): number {
	return sigmaFromKappa(kappaFromRadius(radiusDeg, containment));
}

/** Radius, degrees, of the cap that holds `containment` of the Fisher density with concentration `kappa`. */
export function radiusFromKappa(kappa: number, containment: number): number {
	const versine = versineFromKappa(kappa, containment);
	return 2 * Math.asin(Math.min(1, Math.sqrt(versine / 2))) * DEG_PER_RAD;
}

/** Radius, degrees, of the cap that holds `containment` of the Fisher density with `sigmaDeg`. */
export function radiusFromSigma(sigmaDeg: number, containment: number): number {
	return radiusFromKappa(kappaFromSigma(sigmaDeg), containment);
}

/** Area, square degrees, of the cap that holds `containment` of the Fisher density with concentration `kappa`. */
export function areaFromKappa(kappa: number, containment: number): number {
	return (versineFromKappa(kappa, containment) / 2) * SKY_DEG2;
}

/** Share of the Fisher density with concentration `kappa` within `radiusDeg` of its centre. */
export function containmentOfRadius(kappa: number, radiusDeg: number): number {
	const versine = 2 * Math.sin((radiusDeg * RAD_PER_DEG) / 2) ** 2;
	if (kappa < 1e-12) return versine / 2;
	return Math.expm1(-kappa * versine) / Math.expm1(-2 * kappa);
}

/** Independent errors in quadrature; degrees, one standard deviation per axis. */
export function addInQuadrature(...sigmasDeg: number[]): number {
	return Math.hypot(...sigmasDeg);
}

function versineFromKappa(kappa: number, containment: number): number {
	requireInRange('containment', containment, 0, 1);
	if (kappa < 1e-12) return 2 * containment;
	return Math.min(2, -Math.log1p(containment * Math.expm1(-2 * kappa)) / kappa);
}

function requireContainment(containment: number): void {
	if (!(containment > 0 && containment < 1)) {
		throw new RangeError(`containment is ${containment}; it must be between 0 and 1, exclusive`);
	}
}

/** erf(z/√2): the series below 3, the continued fraction above (Abramowitz & Stegun 1964, 7.1.6 and 7.1.14). */
function gaussianWithin(z: number): number {
	if (z < 3) {
		let term = z;
		let sum = z;
		for (let n = 1; term > 1e-17 * sum; n++) {
			term *= (z * z) / (2 * n + 1);
			sum += term;
		}
		return Math.sqrt(2 / Math.PI) * Math.exp((-z * z) / 2) * sum;
	}
	let fraction = 0;
	for (let n = 60; n >= 1; n--) fraction = n / (z + fraction);
	return 1 - (Math.sqrt(2 / Math.PI) * Math.exp((-z * z) / 2)) / (z + fraction);
}
