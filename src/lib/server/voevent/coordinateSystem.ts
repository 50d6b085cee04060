import { TIME_SCALES, type TimeScale } from '../../sky/time/timeScale';
import { onlyChildOf, refusal, type XmlElement } from './xmlElement';

/** The three parts of a coordinate system's id: UTC-ICRS-TOPO and the like (VOEvent 2.0, section 3.4.1). */
export type CoordinateSystem = {
	id: string;
	scale: TimeScale;
	frame: 'ICRS' | 'FK5';
	/** TOPO and GEO differ by 25 ms in time at most, for observatories on the ground and in low orbits. */
	centre: 'TOPO' | 'GEO' | 'BARY';
};

const ID = new RegExp(`^(${TIME_SCALES.join('|')})-(ICRS|FK5)-(TOPO|GEO|BARY)$`);

/**
 * The system that an ObservationLocation names, by `AstroCoordSystem/@id`, by `AstroCoords/@coord_system_id`,
 * or by both, which must agree.
 *
 * @throws DomainError `invalid` for one that is not known, by its name.
 */
export function coordinateSystemOf(location: XmlElement): CoordinateSystem {
	const system = onlyChildOf(location, 'AstroCoordSystem');
	const coords = onlyChildOf(location, 'AstroCoords');
	const own = system?.attributes.get('id') ?? '';
	const referred = coords?.attributes.get('coord_system_id') ?? '';
	const pointer = own
		? `${system!.pointer}/@id`
		: `${location.pointer}/AstroCoords/@coord_system_id`;
	if (own && referred && own !== referred) {
		throw refusal(
			`${coords!.pointer}/@coord_system_id`,
			`is ${shown(referred)}, but the system’s id is ${shown(own)}`
		);
	}
	const id = own || referred;
	if (!id) throw refusal(pointer, 'is missing: the coordinate system must be named');
	const parts = ID.exec(id);
	if (!parts) {
		throw refusal(
			pointer,
			`names the coordinate system ${shown(id)}, which is not known; known are ${TIME_SCALES.join(', ')} with ICRS or FK5 and TOPO, GEO or BARY`
		);
	}
	return {
		id,
		scale: parts[1] as TimeScale,
		frame: parts[2] as CoordinateSystem['frame'],
		centre: parts[3] as CoordinateSystem['centre']
	};
}

/** A value of the sender's as a refusal may quote it. */
export function shown(text: string): string {
	return text.length > 60 ? `${text.slice(0, 60)}…` : text;
}
