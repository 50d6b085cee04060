import { DEG_PER_RAD, RAD_PER_DEG, type Equatorial } from '../angle';
import { cellAreaSr, cellPoint, pixelAt, toUniq } from '../healpix/healpix';
import type { Shape } from '../regions/shape';
import {
	cross,
	deproject,
	dot,
	offset,
	project,
	separationDeg,
	toEquatorial,
	toVector
} from '../vector';

/** Even draws in [0, 1). */
export type Draw = () => number;

/**
 * A shape with its own sampler and its density over its greatest, both from first principles: nothing here
 * comes from the densities or the mesh that they are held against.
 */
export type SimulatedShape = {
	shape: Shape;
	drawSource: () => Equatorial;
	relativeDensity: (position: Equatorial) => number;
};

/** The kinds of simulated shape. */
export type SimulatedKind = keyof typeof simulatedShapes;

const CONTAINMENT = 0.9;

function circle(source: Equatorial, sizeDeg: number, draw: Draw): SimulatedShape {
	const centre = offset(source, 0.4 * sizeDeg * draw(), 360 * draw());
	const kappa = -Math.log(1 - CONTAINMENT) / versine(sizeDeg);
	return {
		shape: { kind: 'circle', centre, radiusDeg: sizeDeg, containment: CONTAINMENT },
		drawSource: () => offset(centre, radiusDeg(-Math.log(1 - draw()) / kappa), 360 * draw()),
		relativeDensity: (position) => Math.exp(-kappa * versine(separationDeg(centre, position)))
	};
}

function hardCircle(source: Equatorial, sizeDeg: number, draw: Draw): SimulatedShape {
	const centre = offset(source, 0.5 * sizeDeg * draw(), 360 * draw());
	return {
		shape: { kind: 'hardCircle', centre, radiusDeg: sizeDeg },
		drawSource: () => offset(centre, radiusDeg(versine(sizeDeg) * draw()), 360 * draw()),
		relativeDensity: (position) => (separationDeg(centre, position) <= sizeDeg ? 1 : 0)
	};
}

function ellipse(source: Equatorial, sizeDeg: number, draw: Draw): SimulatedShape {
	const centre = offset(source, 0.2 * sizeDeg * draw(), 360 * draw());
	const [semiMajorDeg, semiMinorDeg] = [sizeDeg, sizeDeg * (0.25 + 0.5 * draw())];
	const positionAngleDeg = 180 * draw();
	const [sine, cosine] = sineCosine(positionAngleDeg);
	// 90 % lie within √(2 ln 10) = 2.146 σ.
	const [major, minor] = [semiMajorDeg, semiMinorDeg].map(
		(axis) => axis / Math.sqrt(2 * Math.log(10))
	);
	const at = (along: number, across: number) => ({
		eastDeg: along * sine + across * cosine,
		northDeg: along * cosine - across * sine
	});
	return {
		shape: {
			kind: 'ellipse',
			centre,
			semiMajorDeg,
			semiMinorDeg,
			positionAngleDeg,
			containment: CONTAINMENT
		},
		drawSource: () => deproject(centre, at(gaussian(draw) * major!, gaussian(draw) * minor!)),
		relativeDensity: (position) => {
			const point = project(centre, position);
			if (!point) return 0;
			const along = (point.eastDeg * sine + point.northDeg * cosine) / major!;
			const across = (point.eastDeg * cosine - point.northDeg * sine) / minor!;
			const tan2 = (point.eastDeg ** 2 + point.northDeg ** 2) * RAD_PER_DEG ** 2;
			return Math.exp(-(along ** 2 + across ** 2) / 2) * (1 + tan2) ** 1.5;
		}
	};
}

/** A ring of 20° to 80° as thick as `sizeDeg`. */
function annulus(source: Equatorial, sizeDeg: number, draw: Draw): SimulatedShape {
	const ringDeg = 20 + 60 * draw();
	const halfWidthDeg = sizeDeg / 2;
	const sigmaDeg = halfWidthDeg / 1.6449;
	const centre = offset(source, ringDeg + 0.8 * sigmaDeg * gaussian(draw), 360 * draw());
	return {
		shape: { kind: 'annulus', centre, radiusDeg: ringDeg, halfWidthDeg, containment: CONTAINMENT },
		drawSource: () => {
			for (;;) {
				const distanceDeg = ringDeg + sigmaDeg * gaussian(draw);
				// The ring at θ is sin θ long.
				if (draw() < Math.sin(distanceDeg * RAD_PER_DEG))
					return offset(centre, distanceDeg, 360 * draw());
			}
		},
		relativeDensity: (position) =>
			Math.exp(-(((separationDeg(centre, position) - ringDeg) / sigmaDeg) ** 2) / 2)
	};
}

/** A convex polygon with five vertices on a circle. */
function polygon(source: Equatorial, sizeDeg: number, draw: Draw): SimulatedShape {
	const centre = offset(source, 0.3 * sizeDeg * draw(), 360 * draw());
	const vertices = [0, 1, 2, 3, 4].map((i) => offset(centre, sizeDeg, 72 * (i + 0.6 * draw())));
	const corners = vertices.map(toVector);
	const sides = corners.map((corner, i) => cross(corner, corners[(i + 1) % 5]!));
	const contains = (position: Equatorial) => {
		const signs = sides.map((side) => dot(side, toVector(position)) > 0);
		return signs.every((sign) => sign === signs[0]);
	};
	return {
		shape: { kind: 'polygon', vertices },
		drawSource: () => {
			for (;;) {
				const position = offset(centre, radiusDeg(versine(sizeDeg) * draw()), 360 * draw());
				if (contains(position)) return position;
			}
		},
		relativeDensity: (position) => (contains(position) ? 1 : 0)
	};
}

/** A lumpy map about `sizeDeg` wide, of cells of two orders. */
function map(source: Equatorial, sizeDeg: number, draw: Draw): SimulatedShape {
	const centre = offset(source, 0.3 * sizeDeg * draw(), 360 * draw());
	const order = Math.ceil(Math.log2(58.6 / (0.25 * sizeDeg)));
	const coarse = new Set<number>();
	for (let i = 0; i < 400; i++) {
		const inside = offset(centre, radiusDeg(versine(sizeDeg) * draw()), 360 * draw());
		coarse.add(pixelAt(order, inside));
	}
	const cells = [...coarse].flatMap((pixel) =>
		pixel % 3 === 0
			? [{ order, pixel, density: draw() ** 2 }]
			: [0, 1, 2, 3].map((i) => ({ order: order + 1, pixel: 4 * pixel + i, density: draw() ** 2 }))
	);
	const density = new Map(cells.map((cell) => [toUniq(cell.order, cell.pixel), cell.density]));
	const most = Math.max(...density.values());
	const total = cells.reduce((sum, cell) => sum + cell.density * cellAreaSr(cell.order), 0);
	return {
		shape: { kind: 'map', uniq: [...density.keys()], density: [...density.values()] },
		drawSource: () => {
			let left = draw() * total;
			const cell =
				cells.find((one) => (left -= one.density * cellAreaSr(one.order)) < 0) ?? cells[0]!;
			// Cells have equal areas at every order, so that even draws along their sides are even on the sky.
			return toEquatorial(cellPoint(cell.order, cell.pixel, draw(), draw()));
		},
		relativeDensity: (position) =>
			([order, order + 1]
				.map((at) => density.get(toUniq(at, pixelAt(at, position))))
				.find((value) => value !== undefined) ?? 0) / most
	};
}

/** Simulated shapes of about `sizeDeg`, by kind; each lies so that `source` is a likely place, not the likeliest. */
export const simulatedShapes = { circle, hardCircle, ellipse, annulus, polygon, map };

/** A source drawn from ∝ Π pᵢ: from the first part, kept as often as the others allow. */
export function drawJointSource(parts: SimulatedShape[], draw: Draw): Equatorial {
	const [first, ...others] = parts;
	if (!first) throw new RangeError('parts is empty; it must hold at least one shape');
	for (let tries = 0; tries < 1_000_000; tries++) {
		const position = first.drawSource();
		const chance = others.reduce((product, part) => product * part.relativeDensity(position), 1);
		if (draw() < chance) return position;
	}
	throw new RangeError('parts hardly overlap; no source was found in a million draws');
}

function versine(angleDeg: number): number {
	return 2 * Math.sin((angleDeg * RAD_PER_DEG) / 2) ** 2;
}

function radiusDeg(versine: number): number {
	return 2 * Math.asin(Math.sqrt(versine / 2)) * DEG_PER_RAD;
}

function sineCosine(angleDeg: number): [number, number] {
	return [Math.sin(angleDeg * RAD_PER_DEG), Math.cos(angleDeg * RAD_PER_DEG)];
}

/** Box and Muller 1958. */
function gaussian(draw: Draw): number {
	return Math.sqrt(-2 * Math.log(1 - draw())) * Math.cos(2 * Math.PI * draw());
}
