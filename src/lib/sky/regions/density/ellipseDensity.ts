import { RAD_PER_DEG } from '../../angle';
import { cross, dot, toVector, type Vector } from '../../vector';
import { containmentFactor2d } from '../containment';
import type { EllipseShape } from '../shape';
import { SIDE_PER_SIGMA, SIGMA_MIN_RAD, type CellPlace, type Density } from './density';

/**
 * Bivariate Gaussian on the gnomonic tangent plane, carried to the sphere with the plane's area element
 * 1/cos³θ, so that it integrates to 1 over the hemisphere.
 */
export function ellipseDensity(shape: EllipseShape): Density {
	const sigmaMajor = sigmaRad('semiMajorDeg', shape.semiMajorDeg, shape.containment);
	const sigmaMinor = sigmaRad('semiMinorDeg', shape.semiMinorDeg, shape.containment);
	const sigmaMax = Math.max(sigmaMajor, sigmaMinor);
	const sigmaMin = Math.min(sigmaMajor, sigmaMinor);
	const { axis, along, across } = frameOf(shape);
	const logCentre = -Math.log(2 * Math.PI * sigmaMajor * sigmaMinor);
	// Past σ = 1/√3 (33°) the area element outgrows the Gaussian: the ring where it peaks bounds the density.
	const peakTan2 = Math.max(0, 3 * sigmaMax * sigmaMax - 1);
	const radialLog = (tan2: number) =>
		logCentre - tan2 / (2 * sigmaMax * sigmaMax) + 1.5 * Math.log1p(tan2);

	const logAt: Density['logAt'] = (direction) => {
		const cosTheta = dot(direction, axis);
		if (cosTheta <= 1e-9) return -Infinity;
		const x = dot(direction, along) / cosTheta / sigmaMajor;
		const y = dot(direction, across) / cosTheta / sigmaMinor;
		return logCentre - (x * x + y * y) / 2 - 3 * Math.log(cosTheta);
	};
	const logBound = ({ at, reachRad }: CellPlace) => {
		const x = dot(at, along);
		const y = dot(at, across);
		const cosTheta = dot(at, axis);
		const thetaRad = Math.atan2(Math.hypot(x, y), cosTheta);
		const nearestRad = Math.max(0, thetaRad - reachRad);
		if (nearestRad >= Math.PI / 2) return -Infinity;
		const radial = radialLog(Math.max(peakTan2, Math.tan(nearestRad) ** 2));
		const farthestRad = thetaRad + reachRad;
		if (farthestRad > 1.3) return radial;
		// Within reach, the point in the plane moves at most reach/cos² of the farthest, the tighter axis counting most.
		const cosFarthest = Math.cos(farthestRad);
		const moved = reachRad / (cosFarthest * cosFarthest) / sigmaMin;
		const mahalanobis = Math.hypot(x / cosTheta / sigmaMajor, y / cosTheta / sigmaMinor);
		const nearest = Math.max(0, mahalanobis - moved);
		return Math.min(radial, logCentre - (nearest * nearest) / 2 - 3 * Math.log(cosFarthest));
	};
	return {
		logAt,
		logIn: (cell) => logAt(cell.at),
		logBound,
		logPeak: radialLog(peakTan2),
		sideRad: () => sigmaMin * SIDE_PER_SIGMA
	};
}

function sigmaRad(name: string, semiAxisDeg: number, containment: number): number {
	if (!(semiAxisDeg > 0 && semiAxisDeg <= 90)) {
		throw new RangeError(`${name} is ${semiAxisDeg}; it must be above 0 and at most 90`);
	}
	const sigma = (semiAxisDeg * RAD_PER_DEG) / containmentFactor2d(containment);
	return Math.max(SIGMA_MIN_RAD, sigma);
}

/** The centre's direction, the major axis' and the minor axis' (a quarter turn further east). */
function frameOf(shape: EllipseShape): { axis: Vector; along: Vector; across: Vector } {
	const axis = toVector(shape.centre);
	const raRad = shape.centre.raDeg * RAD_PER_DEG;
	const east = { x: -Math.sin(raRad), y: Math.cos(raRad), z: 0 };
	const north = cross(axis, east);
	const angleRad = shape.positionAngleDeg * RAD_PER_DEG;
	const mix = (n: number, e: number) => ({
		x: n * north.x + e * east.x,
		y: n * north.y + e * east.y,
		z: n * north.z + e * east.z
	});
	return {
		axis,
		along: mix(Math.cos(angleRad), Math.sin(angleRad)),
		across: mix(-Math.sin(angleRad), Math.cos(angleRad))
	};
}
