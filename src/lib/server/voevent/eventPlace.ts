import { coordinateSystemOf } from './coordinateSystem';
import { eventPosition, type EventPosition } from './eventPosition';
import { eventTime, type EventTime } from './eventTime';
import { onlyChildOf, elementAt, type XmlElement } from './xmlElement';

export type EventPlace = {
	position: EventPosition | null;
	time: EventTime | null;
	/** Where an AstroCoords stands or should stand. */
	pointer: string;
};

/** What `WhereWhen` says, in ICRS and UTC. */
export function eventPlace(root: XmlElement): EventPlace {
	const pointer = '/VOEvent/WhereWhen/ObsDataLocation/ObservationLocation';
	const location = elementAt(root, 'WhereWhen', 'ObsDataLocation', 'ObservationLocation');
	if (!location) return { position: null, time: null, pointer };
	const system = coordinateSystemOf(location);
	const coords = onlyChildOf(location, 'AstroCoords');
	const position = eventPosition(coords, system);
	return { position, time: eventTime(coords, system, position?.centre ?? null), pointer };
}
