import type { Equatorial } from '../../sky/angle';
import type { Shape } from '../../sky/regions/shape';
import { deproject, offset, toEquatorial, toVector } from '../../sky/vector';

const CORNERS = 72;
const turn = (i: number) => (i * 360) / CORNERS;

/** Points around a circle on the sky, closed; degrees. */
export function circleOutline(centre: Equatorial, radiusDeg: number): Equatorial[] {
	return Array.from({ length: CORNERS + 1 }, (_, i) => offset(centre, radiusDeg, turn(i)));
}

/** Closed rings that show a shape: one for most, two for an annulus, none for a map. */
export function shapeOutline(shape: Shape): Equatorial[][] {
	switch (shape.kind) {
		case 'circle':
		case 'hardCircle':
			return [circleOutline(shape.centre, shape.radiusDeg)];
		case 'ellipse': {
			const { centre, semiMajorDeg, semiMinorDeg, positionAngleDeg } = shape;
			const angleRad = (positionAngleDeg * Math.PI) / 180;
			return [
				Array.from({ length: CORNERS + 1 }, (_, i) => {
					const t = (turn(i) * Math.PI) / 180;
					const along = semiMajorDeg * Math.cos(t);
					const across = semiMinorDeg * Math.sin(t);
					return deproject(centre, {
						eastDeg: along * Math.sin(angleRad) + across * Math.cos(angleRad),
						northDeg: along * Math.cos(angleRad) - across * Math.sin(angleRad)
					});
				})
			];
		}
		case 'annulus':
			return [shape.radiusDeg - shape.halfWidthDeg, shape.radiusDeg + shape.halfWidthDeg]
				.filter((radiusDeg) => radiusDeg > 0)
				.map((radiusDeg) => circleOutline(shape.centre, Math.min(radiusDeg, 180)));
		case 'polygon': {
			const [first] = shape.vertices;
			return first ? [[...shape.vertices, first]] : [];
		}
		case 'map':
			return [];
	}
}

/** The middle of points on the sky, for a chart's centre; the origin where they are all around. */
export function middleOf(points: readonly Equatorial[]): Equatorial {
	const sum = { x: 0, y: 0, z: 0 };
	for (const point of points) {
		const { x, y, z } = toVector(point);
		sum.x += x;
		sum.y += y;
		sum.z += z;
	}
	return Math.hypot(sum.x, sum.y, sum.z) < 1e-9 ? { raDeg: 0, decDeg: 0 } : toEquatorial(sum);
}
