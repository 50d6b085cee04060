import { XMLBuilder } from 'fast-xml-parser';
import type { CitationRelation } from '../../domain/vocabulary';
import type { Equatorial } from '../../sky/angle';
import { xmlText } from './guardXml';

export type VoEventParam = {
	name: string;
	value: string | number;
	/** Of a number; `float` unless it counts something. */
	dataType?: 'int' | 'float';
	unit?: string;
	ucd?: string;
	description?: string;
};

/** What a VOEvent 2.0 of our own says. */
export type VoEvent = {
	ivorn: string;
	role: 'observation' | 'test';
	authorIvorn: string;
	date: Date;
	/** Null in a retraction. */
	place: { t0: Date; centre: Equatorial; radiusDeg: number } | null;
	params: VoEventParam[];
	groups: { name: string; params: VoEventParam[] }[];
	why: { name: string; concepts: string[]; description: string; oneSource: number | null };
	cites: { ivorn: string; relation: CitationRelation }[];
	description: string;
	/** Address of a page about it. */
	page: string;
};

const NAMESPACE = 'http://www.ivoa.net/xml/VOEvent/v2.0';
/** Times are those of the streams' own observatories, which lie on the Earth or within the Moon's orbit. */
const SYSTEM = 'UTC-ICRS-TOPO';
const OBSERVATORY = 'GEOLUN';

const builder = new XMLBuilder({
	ignoreAttributes: false,
	attributeNamePrefix: '@',
	format: true,
	indentBy: '\t',
	suppressEmptyNode: true
});

type Node = { [name: string]: string | Node | Node[] | string[] | undefined };

/** Writes a VOEvent as IVOA VOEvent 2.0 in UTF-8. */
export function voEventDocument(event: VoEvent): string {
	const { place, cites, why } = event;
	const root: Node = {
		'@xmlns:voe': NAMESPACE,
		'@xmlns:xsi': 'http://www.w3.org/2001/XMLSchema-instance',
		'@xsi:schemaLocation': `${NAMESPACE} http://www.ivoa.net/xml/VOEvent/VOEvent-v2.0.xsd`,
		'@version': '2.0',
		'@role': event.role,
		'@ivorn': event.ivorn,
		Who: {
			AuthorIVORN: event.authorIvorn,
			Date: secondsOf(event.date),
			Author: { title: 'Duskline' }
		},
		What: {
			Param: event.params.map(paramNode),
			...(event.groups.length > 0
				? {
						Group: event.groups.map(({ name, params }) => ({
							'@name': name,
							Param: params.map(paramNode)
						}))
					}
				: {})
		},
		...(place ? { WhereWhen: whereWhen(place) } : {}),
		Why: whyNode(why),
		...(cites.length > 0
			? {
					Citations: {
						EventIVORN: cites.map(({ ivorn, relation }) => ({
							'@cite': relation,
							'#text': xmlText(ivorn)
						}))
					}
				}
			: {}),
		Description: xmlText(event.description),
		Reference: { '@uri': event.page, '@type': 'url' }
	};
	return `<?xml version="1.0" encoding="UTF-8"?>\n${builder.build({ 'voe:VOEvent': root })}`;
}

function whereWhen({ t0, centre, radiusDeg }: NonNullable<VoEvent['place']>): Node {
	return {
		ObsDataLocation: {
			ObservatoryLocation: { '@id': OBSERVATORY },
			ObservationLocation: {
				AstroCoordSystem: { '@id': SYSTEM },
				AstroCoords: {
					'@coord_system_id': SYSTEM,
					Time: {
						'@unit': 's',
						TimeInstant: { ISOTime: t0.toISOString().slice(0, -1) }
					},
					Position2D: {
						'@unit': 'deg',
						Name1: 'RA',
						Name2: 'Dec',
						Value2: { C1: positionNumber(centre.raDeg), C2: positionNumber(centre.decDeg) },
						Error2Radius: String(Number(radiusDeg.toPrecision(6)))
					}
				}
			}
		}
	};
}

function whyNode({ name, concepts, description, oneSource }: VoEvent['why']): Node {
	return {
		Name: name,
		Concept: concepts,
		Description: xmlText(description),
		...(oneSource === null
			? {}
			: {
					Inference: {
						'@probability': String(Number(oneSource.toFixed(6))),
						'@relation': 'associated',
						Name: 'The alerts have one source'
					}
				})
	};
}

function paramNode({
	name,
	value,
	dataType = 'float',
	unit,
	ucd,
	description
}: VoEventParam): Node {
	return {
		'@name': name,
		'@value': xmlText(String(value)),
		'@dataType': typeof value === 'string' ? 'string' : dataType,
		...(unit ? { '@unit': unit } : {}),
		...(ucd ? { '@ucd': ucd } : {}),
		...(description ? { Description: description } : {})
	};
}

/** To 0.4 mas. */
function positionNumber(angleDeg: number): string {
	return String(Number(angleDeg.toFixed(7)));
}

function secondsOf(date: Date): string {
	return `${date.toISOString().slice(0, 19)}Z`;
}
