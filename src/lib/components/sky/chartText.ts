import type { BoardTransient } from '../../domain/board';
import type { Shape } from '../../sky/regions/shape';
import { formatPosition } from '../format/formatPosition';
import { formatAngle, formatArea } from '../format/formatQuantity';

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

/** The sky chart in words. */
export function chartText({ designation, parts, region }: BoardTransient): string {
	if (!region) return `Sky chart of ${designation}: no live alert, nothing to draw.`;
	const { ra, dec } = formatPosition(region.centre, region.equivalentRadiusDeg);
	const heard = parts.map((part) => `${part.streamName} ${shapeText(part.shape)}`).join(', ');
	return `Sky chart of ${designation}, north up, east to the left. Joint region ${formatArea(region.area90Deg2)} around ${ra} ${dec}. From ${heard}.`;
}
