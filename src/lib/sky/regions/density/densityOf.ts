import type { Shape } from '../shape';
import { annulusDensity } from './annulusDensity';
import { circleDensity } from './circleDensity';
import type { Density } from './density';
import { ellipseDensity } from './ellipseDensity';
import { hardCircleDensity } from './hardCircleDensity';
import { mapDensity } from './mapDensity';
import { polygonDensity } from './polygonDensity';
import { sortedMap } from './sortedMap';

/** The normalised density of any shape; throws a RangeError that names what is wrong with it. */
export function densityOf(shape: Shape): Density {
	switch (shape.kind) {
		case 'circle':
			return circleDensity(shape);
		case 'hardCircle':
			return hardCircleDensity(shape);
		case 'ellipse':
			return ellipseDensity(shape);
		case 'annulus':
			return annulusDensity(shape);
		case 'polygon':
			return polygonDensity(shape);
		case 'map':
			return mapDensity(sortedMap(shape));
	}
}
