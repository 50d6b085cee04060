import type { Equatorial } from '../../src/lib/sky/angle';
import { cellCentre } from '../../src/lib/sky/healpix/healpix';
import type { MapShape } from '../../src/lib/sky/regions/shape';
import { separationDeg } from '../../src/lib/sky/vector';

/**
 * A multi-order map of a Gaussian about `middle` whose 90 % area is `areaDeg2`: cells of order `finest` inside
 * that area, coarse ones outside.
 */
export function gaussianMap(finest: number, areaDeg2: number, middle: Equatorial): MapShape {
	const edgeDeg = Math.sqrt(areaDeg2 / Math.PI);
	const sigmaDeg = edgeDeg / 2.146;
	const map: MapShape = { kind: 'map', uniq: [], density: [] };
	const add = (order: number, pixel: number) => {
		const distanceDeg = separationDeg(cellCentre(order, pixel), middle);
		if (order < finest && distanceDeg < edgeDeg + 60 / 2 ** order) {
			for (let child = 0; child < 4; child++) add(order + 1, 4 * pixel + child);
			return;
		}
		map.uniq.push(4 * 4 ** order + pixel);
		map.density.push(Math.exp(-((distanceDeg / sigmaDeg) ** 2) / 2));
	};
	for (let pixel = 0; pixel < 12; pixel++) add(0, pixel);
	return map;
}
