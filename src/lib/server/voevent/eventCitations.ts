import type { AlertContent } from '../../domain/alertPacket';
import { CITATION_RELATIONS, type AlertKind, type CitationRelation } from '../../domain/vocabulary';
import { shown } from './coordinateSystem';
import { childOf, childrenOf, refusal, type XmlElement } from './xmlElement';

const MOST_CITATIONS = 20;

/** The strongest relation wins where one packet is cited twice. */
const STRENGTH: Record<CitationRelation, number> = { followup: 0, supersedes: 1, retraction: 2 };

/** An IVORN as it is kept: printable ASCII without spaces, at most 200 characters. */
export function requireIvorn(text: string, pointer: string): string {
	if (text === '') throw refusal(pointer, 'is missing');
	if (text.length > 200) {
		throw refusal(pointer, `is ${text.length} characters long, 200 at most: ${shown(text)}`);
	}
	if (!/^[\x21-\x7e]+$/.test(text)) {
		throw refusal(pointer, `must be printable ASCII without spaces, not ${shown(text)}`);
	}
	return text;
}

/**
 * What a packet cites, each packet once. An IVORN does not say which stream it belongs to.
 *
 * @throws DomainError `invalid` for a relation that is not known, by its name.
 */
export function eventCitations(
	root: XmlElement,
	ivorn: string
): { cites: AlertContent['cites']; notes: string[] } {
	const notes: string[] = [];
	const found = new Map<string, CitationRelation>();
	const elements = childrenOf(childOf(root, 'Citations'), 'EventIVORN');
	for (const element of elements) {
		const cited = requireIvorn(element.text, element.pointer);
		if (cited === ivorn) throw refusal(element.pointer, `cites the packet itself, ${shown(cited)}`);
		const relation = relationOf(element, notes);
		const before = found.get(cited);
		if (before === undefined || STRENGTH[relation] > STRENGTH[before]) found.set(cited, relation);
	}
	if (found.size > MOST_CITATIONS) {
		throw refusal('/VOEvent/Citations', `cites ${found.size} packets, ${MOST_CITATIONS} at most`);
	}
	const cites = [...found].map(([packetId, relation]) => ({ stream: null, packetId, relation }));
	return { cites, notes };
}

/** A retraction takes back, an update replaces all that the packet it supersedes said. */
export function kindOf(cites: AlertContent['cites']): AlertKind {
	const has = (relation: CitationRelation) => cites.some((cite) => cite.relation === relation);
	if (has('retraction')) return 'retraction';
	return has('supersedes') ? 'update' : 'report';
}

function relationOf(element: XmlElement, notes: string[]): CitationRelation {
	const cite = element.attributes.get('cite') ?? '';
	if (cite === '') {
		notes.push(`${shown(element.text)} is cited without a relation; it was taken as followup`);
		return 'followup';
	}
	const relation = CITATION_RELATIONS.find((known) => known === cite);
	if (relation) return relation;
	throw refusal(
		`${element.pointer}/@cite`,
		`is ${shown(cite)}; known are ${CITATION_RELATIONS.join(', ')}`
	);
}
