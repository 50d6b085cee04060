import type { Shape } from '../../sky/regions/shape';

/** A shape as pages get it: without a map's cells, megabytes of which no chart draws a line from. */
export function shownShape(shape: Shape): Shape {
	return shape.kind === 'map' ? { kind: 'map', uniq: [], density: [] } : shape;
}
