import { alertContentSchema, type AlertContent } from '../../domain/alertPacket';
import type { AlertRole } from '../../domain/vocabulary';
import { DomainError } from '../domainError';
import { parseInput } from '../http/problem';
import type { KeptPacket, ReadOutcome, StreamRow } from '../packets/readOutcome';
import { shown } from './coordinateSystem';
import { eventCitations, kindOf, requireIvorn } from './eventCitations';
import { eventParams } from './eventParams';
import { eventRemarks } from './eventRemarks';
import { plainUtcDate } from './eventTime';
import { eventPlace, type EventPlace } from './eventPlace';
import { readXml } from './readXml';
import { childOf, refusal, type XmlElement } from './xmlElement';

/** What of a stream's settings a VOEvent is read with. */
type Settings = Pick<StreamRow, 'paramMap' | 'defaultContainment' | 'defaultSystematicDeg'>;

/** Roles of packets that are no alerts, and why (VOEvent 2.0, section 3.1). */
const NO_ALERT: Record<string, string> = {
	prediction:
		'It foretells something (role prediction) and reports nothing that happened: kept, but no alert.',
	utility:
		'It is about the system that sends it (role utility), not about the sky: kept, but no alert.'
};

/** Reads a packet in VOEvent 2.0 (IVOA Recommendation 2011-07-11). */
export function readVoEvent(
	{ body, receivedAt }: Pick<KeptPacket, 'body' | 'receivedAt'>,
	source: Settings
): ReadOutcome {
	const root = requireVoEvent(readXml(body));
	const ivorn = requireIvorn(root.attributes.get('ivorn') ?? '', '/VOEvent/@ivorn');
	const role = roleOf(root);
	if (role !== 'observation' && role !== 'test') return { kind: 'noted', reason: NO_ALERT[role]! };

	const { cites, notes: citationNotes } = eventCitations(root, ivorn);
	const base = {
		packetId: ivorn,
		serial: 1,
		role,
		kind: kindOf(cites),
		cites,
		remarks: eventRemarks(root)
	};
	const { numbers, notes: paramNotes } = eventParams(root, source.paramMap);
	const { systematicDeg = source.defaultSystematicDeg, ...measures } = numbers;
	const when =
		base.kind === 'retraction'
			? retractionTime(root, receivedAt)
			: alertPlace(root, { containment: source.defaultContainment, systematicDeg });
	const content: AlertContent = { ...base, ...measures, ...when.content };
	return {
		kind: 'alert',
		content: parseInput(alertContentSchema, content),
		notes: [...citationNotes, ...when.notes, ...paramNotes]
	};
}

function requireVoEvent(root: XmlElement): XmlElement {
	if (root.name !== 'VOEvent') {
		const name = shown(root.name);
		throw refusal(`/${name}`, `is the root element; a VOEvent was expected`);
	}
	const version = root.attributes.get('version') ?? '';
	if (version !== '2.0') {
		throw refusal(
			'/VOEvent/@version',
			version === '' ? 'is missing; 2.0 is read' : `is ${shown(version)}; 2.0 is read`
		);
	}
	return root;
}

function roleOf(root: XmlElement): AlertRole | 'prediction' | 'utility' {
	// The schema's default.
	const role = root.attributes.get('role') ?? 'observation';
	if (role === 'observation' || role === 'test' || role === 'prediction' || role === 'utility') {
		return role;
	}
	throw refusal(
		'/VOEvent/@role',
		`is ${shown(role)}; known are observation, prediction, utility and test`
	);
}

type When = { content: Pick<AlertContent, 't0' | 'shape'>; notes: string[] };

/** Where and when of a report or update: both are needed. */
function alertPlace(
	root: XmlElement,
	{ containment, systematicDeg }: { containment: number; systematicDeg: number }
): When {
	const place = eventPlace(root);
	const { time, position } = place;
	if (!position) {
		throw refusal(
			`${place.pointer}/AstroCoords/Position2D`,
			'is missing: an alert needs a position'
		);
	}
	if (position.radiusDeg === null) {
		throw refusal(
			position.radiusPointer,
			'is missing or not a number above 0: an alert needs a radius'
		);
	}
	if (position.radiusDeg > 180) {
		throw refusal(position.radiusPointer, `is ${position.radiusDeg}°; 180° at most`);
	}
	if (!time) {
		throw refusal(
			`${place.pointer}/AstroCoords/Time/TimeInstant/ISOTime`,
			'is missing: an alert needs the time of its event'
		);
	}
	const { centre, radiusDeg } = position;
	const systematic = systematicDeg > 0 ? { systematicDeg } : {};
	return {
		content: {
			t0: time.t0,
			shape: { kind: 'circle', centre, radiusDeg, containment, ...systematic }
		},
		notes: [...position.notes, ...time.notes]
	};
}

/**
 * A retraction needs no place and says whose it is by what it cites: nothing that is wrong with its time may
 * keep it from taking an alert back.
 */
function retractionTime(root: XmlElement, receivedAt: Date): When {
	const place = placeIfReadable(root);
	const notes = place?.position ? ['the position in the retraction was not used'] : [];
	const written = plainUtcDate(childOf(childOf(root, 'Who'), 'Date'));
	const [t0, found] = place?.time
		? [place.time.t0, place.time.notes]
		: written
			? [written, ['the retraction gives no time of the event; its own date was taken']]
			: [null, ['the retraction gives no time; that of its receipt was taken']];
	if (t0 !== null && Date.parse(t0) <= receivedAt.getTime()) {
		return { content: { t0 }, notes: [...found, ...notes] };
	}
	const late =
		t0 === null ? found : ['the retraction’s time lies ahead; that of its receipt was taken'];
	return { content: { t0: receivedAt.toISOString() }, notes: [...late, ...notes] };
}

function placeIfReadable(root: XmlElement): EventPlace | null {
	try {
		return eventPlace(root);
	} catch (error) {
		if (error instanceof DomainError) return null;
		throw error;
	}
}
