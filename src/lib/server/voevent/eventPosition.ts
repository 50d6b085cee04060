import { DEG_PER_RAD, normaliseDeg, type Equatorial } from '../../sky/angle';
import { icrsOfFk5 } from '../../sky/frames/fk5';
import { shown, type CoordinateSystem } from './coordinateSystem';
import { onlyChildOf, elementAt, floatOf, refusal, type XmlElement } from './xmlElement';

export type EventPosition = {
	/** ICRS. */
	centre: Equatorial;
	/** Null where it is missing, not a number, or not above 0. */
	radiusDeg: number | null;
	radiusPointer: string;
	notes: string[];
};

/** Degrees in each unit that a position may be given in. */
const UNITS: Record<string, number> = {
	deg: 1,
	degree: 1,
	degrees: 1,
	'deg deg': 1,
	'deg-deg': 1,
	rad: DEG_PER_RAD,
	radian: DEG_PER_RAD,
	radians: DEG_PER_RAD,
	'rad rad': DEG_PER_RAD,
	arcmin: 1 / 60,
	arcsec: 1 / 3600
};

/** Turns further than this are no right ascension. */
const MOST_RA_DEG = 3600;
/** Rounding on the way from radians. */
const DEC_ROUNDING_DEG = 1e-9;

/**
 * The position that an AstroCoords gives, in ICRS and degrees; null without one.
 *
 * @throws DomainError `invalid` naming what is wrong with it.
 */
export function eventPosition(
	coords: XmlElement | undefined,
	system: CoordinateSystem
): EventPosition | null {
	const position = onlyChildOf(coords, 'Position2D');
	if (!position) {
		const solid = onlyChildOf(coords, 'Position3D');
		if (!solid) return null;
		throw refusal(solid.pointer, 'is not read; give the position as Position2D');
	}
	const notes: string[] = [];
	requireEquatorialNames(position);
	const degPerUnit = unitOf(position, notes);
	const ra = numberAt(position, 'C1') * degPerUnit;
	const dec = numberAt(position, 'C2') * degPerUnit;
	const decPointer = `${position.pointer}/Value2/C2`;
	if (Math.abs(ra) > MOST_RA_DEG) {
		throw refusal(`${position.pointer}/Value2/C1`, `is ${ra}°, which is no right ascension`);
	}
	if (Math.abs(dec) > 90 + DEC_ROUNDING_DEG) {
		throw refusal(decPointer, `is ${dec}°; a declination lies between -90 and 90°`);
	}
	const raDeg = normaliseDeg(ra);
	if (raDeg !== ra) notes.push(`right ascension ${ra}° was folded into 0 to 360°`);
	const given = { raDeg, decDeg: Math.max(-90, Math.min(90, dec)) };
	if (system.frame === 'FK5') notes.push('position turned from FK5 (J2000) into ICRS');
	const radius = floatOf(onlyChildOf(position, 'Error2Radius')?.text);
	return {
		centre: system.frame === 'FK5' ? icrsOfFk5(given) : given,
		radiusDeg: radius !== null && radius > 0 ? radius * degPerUnit : null,
		radiusPointer: `${position.pointer}/Error2Radius`,
		notes
	};
}

/** Names are optional; where they are given they say which coordinate is which. */
function requireEquatorialNames(position: XmlElement): void {
	const wanted = { Name1: /^(ra|right ascension)$/i, Name2: /^(de|dec|declination)$/i };
	for (const [name, pattern] of Object.entries(wanted)) {
		const element = onlyChildOf(position, name);
		if (element && element.text !== '' && !pattern.test(element.text)) {
			throw refusal(
				element.pointer,
				`is ${shown(element.text)}; only RA as the first and Dec as the second are read`
			);
		}
	}
}

function unitOf(position: XmlElement, notes: string[]): number {
	const unit = position.attributes.get('unit') ?? '';
	if (unit === '') {
		notes.push('the position names no unit; it was taken as degrees');
		return 1;
	}
	const known = unit.toLowerCase().replace(/\s+/g, ' ');
	const degPerUnit = Object.hasOwn(UNITS, known) ? UNITS[known] : undefined;
	if (degPerUnit === undefined) {
		throw refusal(
			`${position.pointer}/@unit`,
			`is ${shown(unit)}, which is not read; give deg, rad, arcmin or arcsec`
		);
	}
	if (degPerUnit !== 1) notes.push(`position given in ${known} was turned into degrees`);
	return degPerUnit;
}

function numberAt(position: XmlElement, name: 'C1' | 'C2'): number {
	const value = floatOf(elementAt(position, 'Value2', name)?.text);
	if (value === null) {
		throw refusal(`${position.pointer}/Value2/${name}`, 'is missing or not a number');
	}
	return value;
}
