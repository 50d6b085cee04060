import type { Shape } from '../sky/regions/shape';
import { formatAngle } from './quantity';

/** A shape in words: `circle of radius 3.1°`. */
export function shapeText(shape: Shape): string {
	switch (shape.kind) {
		case 'circle':
			return `circle of radius ${formatAngle(shape.radiusDeg)} (${Math.round(shape.containment * 100)} %)`;
		case 'hardCircle':
			return `circle of radius ${formatAngle(shape.radiusDeg)}`;
		case 'ellipse':
			return `ellipse of ${formatAngle(shape.semiMajorDeg)} by ${formatAngle(shape.semiMinorDeg)} (${Math.round(shape.containment * 100)} %)`;
		case 'annulus':
			return `ring of radius ${formatAngle(shape.radiusDeg)}, ${formatAngle(shape.halfWidthDeg)} to either side`;
		case 'polygon':
			return `outline with ${shape.vertices.length} corners`;
		case 'map':
			return 'probability map';
	}
}
