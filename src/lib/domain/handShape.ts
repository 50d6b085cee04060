import { normaliseDeg, type Equatorial } from '../sky/angle';
import { parseUnfolded } from '../sky/positionText';
import { densityOf } from '../sky/regions/density/densityOf';
import type { Shape } from '../sky/regions/shape';

/** Shapes that can be typed; a map is too long for a form. */
export const HAND_SHAPES = ['circle', 'hardCircle', 'ellipse', 'annulus', 'polygon'] as const;
export type HandShapeKind = (typeof HAND_SHAPES)[number];

export const HAND_SHAPE_LABELS: Record<HandShapeKind, string> = {
	circle: 'Circle, densest in the middle',
	hardCircle: 'Circle, even inside and nothing outside',
	ellipse: 'Ellipse',
	annulus: 'Ring',
	polygon: 'Outline with corners'
};

export const ANGLE_UNITS = ['deg', 'arcmin', 'arcsec'] as const;
export type AngleUnit = (typeof ANGLE_UNITS)[number];

const UNITS_PER_DEG: Record<AngleUnit, number> = { deg: 1, arcmin: 60, arcsec: 3600 };

/** What is typed of a shape. */
export type HandShapeFields = {
	shape: HandShapeKind;
	/** Right ascension and declination in one. */
	position: string;
	/** Radius; of an ellipse the longer half-axis. */
	radius: string;
	radiusUnit: AngleUnit;
	/** The shorter half-axis. */
	semiMinor: string;
	positionAngle: string;
	halfWidth: string;
	/** Percent. */
	containment: string;
	/** One position a line. */
	vertices: string;
};

export type FormError = { pointer: string; detail: string };
export type HandShape = {
	/** Right ascensions as typed; null while something is wrong. */
	shape: Shape | null;
	errors: FormError[];
	/** Fields with right ascensions outside 0 to 360°, and what they are folded to, degrees. */
	folded: { field: 'position' | 'vertices'; typedDeg: number; raDeg: number }[];
};

const UNREAD = 'Not read as a position: right ascension, then declination.';
const VERTICES_MAX = 200;

/** Reads a typed shape; what is wrong is said at its field. */
export function readHandShape(fields: HandShapeFields): HandShape {
	const errors: FormError[] = [];
	const folded: HandShape['folded'] = [];
	const fail = (field: string, detail: string) =>
		void errors.push({ pointer: `/${field}`, detail });
	const number = (field: keyof HandShapeFields, low: number, high: number, unit = ''): number => {
		const text = fields[field].trim();
		const value = Number(text);
		if (text === '') fail(field, 'A number is needed.');
		else if (!(value >= low && value <= high)) {
			fail(field, `Must be a number from ${low} to ${high}${unit && ` ${unit}`}.`);
		}
		return value;
	};
	const angle = (field: 'radius' | 'semiMinor' | 'halfWidth', mostDeg: number): number => {
		const text = fields[field].trim();
		const angleDeg = Number(text) / UNITS_PER_DEG[fields.radiusUnit];
		if (text === '') fail(field, 'A number is needed.');
		else if (!(angleDeg > 0 && angleDeg <= mostDeg)) {
			fail(field, `Must be above 0 and at most ${mostDeg}°.`);
		}
		return angleDeg;
	};
	const position = (field: 'position' | 'vertices', text: string, where = ''): Equatorial => {
		const read = parseUnfolded(text);
		if (!read) fail(field, `${where}${text.trim() === '' ? 'A position is needed.' : UNREAD}`);
		else if (read.raDeg < 0 || read.raDeg >= 360) {
			folded.push({ field, typedDeg: read.raDeg, raDeg: normaliseDeg(read.raDeg) });
		}
		return read ?? { raDeg: 0, decDeg: 0 };
	};
	const containment = () => number('containment', 0.1, 99.9, '%') / 100;

	const shape = ((): Shape => {
		const kind = fields.shape;
		if (kind === 'polygon') {
			const lines = fields.vertices
				.split('\n')
				.map((text, i) => ({ text, i }))
				.filter(({ text }) => text.trim() !== '');
			if (lines.length < 3) fail('vertices', 'At least three corners, one a line.');
			if (lines.length > VERTICES_MAX) fail('vertices', `At most ${VERTICES_MAX} corners.`);
			return {
				kind,
				vertices: lines.map(({ text, i }) => position('vertices', text, `Line ${i + 1}: `))
			};
		}
		const centre = position('position', fields.position);
		switch (kind) {
			case 'circle':
				return { kind, centre, radiusDeg: angle('radius', 180), containment: containment() };
			case 'hardCircle':
				return { kind, centre, radiusDeg: angle('radius', 180) };
			case 'annulus':
				return {
					kind,
					centre,
					radiusDeg: angle('radius', 180),
					halfWidthDeg: angle('halfWidth', 90),
					containment: containment()
				};
			case 'ellipse': {
				const semiMajorDeg = angle('radius', 45);
				const semiMinorDeg = angle('semiMinor', 45);
				if (semiMinorDeg > semiMajorDeg) fail('semiMinor', 'Must not exceed the longer half-axis.');
				const positionAngleDeg = number('positionAngle', -360, 360, 'deg');
				return {
					kind,
					centre,
					semiMajorDeg,
					semiMinorDeg,
					positionAngleDeg,
					containment: containment()
				};
			}
		}
	})();
	if (errors.length === 0) {
		try {
			densityOf(foldedShape(shape));
		} catch (error) {
			if (!(error instanceof RangeError)) throw error;
			fail(shape.kind === 'polygon' ? 'vertices' : 'shape', `${error.message}.`);
		}
	}
	return { shape: errors.length === 0 ? shape : null, errors, folded };
}

/** The same shape with right ascensions in [0, 360). */
export function foldedShape(shape: Shape): Shape {
	const fold = ({ raDeg, decDeg }: Equatorial) => ({ raDeg: normaliseDeg(raDeg), decDeg });
	if (shape.kind === 'map') return shape;
	return shape.kind === 'polygon'
		? { ...shape, vertices: shape.vertices.map(fold) }
		: { ...shape, centre: fold(shape.centre) };
}
