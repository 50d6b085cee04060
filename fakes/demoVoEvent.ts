import { XMLBuilder } from 'fast-xml-parser';
import type { AlertPacket } from '../src/lib/domain/alertPacket';
import type { DemoStream } from './demoEvents';

/** The demo's IVORN of a packet: the stream's authority, and the packet's own part. */
export function demoIvorn(stream: DemoStream, local: string): string {
	return `ivo://${stream}.example/alerts#${local}`;
}

const builder = new XMLBuilder({
	ignoreAttributes: false,
	attributeNamePrefix: '@',
	format: true,
	indentBy: '\t'
});

const COORDINATES = 'UTC-ICRS-GEO';

/**
 * A packet as an IVOA VOEvent 2.0 whose IVORN is the packet's id: circles about a place in ICRS, times in UTC,
 * earlier packets cited by their IVORN. VOEvent has no serial numbers, so an update is a packet of its own.
 */
export function demoVoEvent(packet: AlertPacket, authoredAt: Date): string {
	const { shape } = packet;
	if (packet.serial !== 1 || (shape && shape.kind !== 'circle')) {
		throw new Error(`${packet.packetId} can’t be written as a VOEvent`);
	}
	const xml: unknown = builder.build({
		'?xml': { '@version': '1.0', '@encoding': 'UTF-8' },
		'voe:VOEvent': {
			'@xmlns:voe': 'http://www.ivoa.net/xml/VOEvent/v2.0',
			'@version': '2.0',
			'@ivorn': packet.packetId,
			'@role': packet.role,
			Who: {
				AuthorIVORN: packet.packetId.split('#')[0],
				Date: timeOf(authoredAt.toISOString())
			},
			...(packet.significance === undefined ? {} : { What: { Group: detectionOf(packet) } }),
			WhereWhen: {
				ObsDataLocation: {
					ObservatoryLocation: { '@id': 'GEOLEO' },
					ObservationLocation: {
						AstroCoordSystem: { '@id': COORDINATES },
						AstroCoords: {
							'@coord_system_id': COORDINATES,
							Time: { '@unit': 's', TimeInstant: { ISOTime: timeOf(packet.t0) } },
							...(shape
								? {
										Position2D: {
											'@unit': 'deg',
											Name1: 'RA',
											Name2: 'Dec',
											Value2: { C1: shape.centre.raDeg, C2: shape.centre.decDeg },
											Error2Radius: shape.radiusDeg
										}
									}
								: {})
						}
					}
				}
			},
			...(packet.cites.length === 0
				? {}
				: {
						Citations: {
							EventIVORN: packet.cites.map(({ packetId, relation }) => ({
								'@cite': relation,
								'#text': packetId
							}))
						}
					}),
			...(packet.remarks === '' ? {} : { Description: packet.remarks })
		}
	});
	return String(xml);
}

/** The Params that the demo stream's settings name (`paramMap` in server/demo/demoStreams.ts). */
function detectionOf({ significance, falseAlarmPerYear }: AlertPacket) {
	const param = (name: string, value: number | undefined, more: Record<string, string>) =>
		value === undefined ? [] : [{ '@name': name, '@value': value, '@dataType': 'float', ...more }];
	return {
		'@name': 'detection',
		Param: [
			...param('significance', significance, { '@ucd': 'stat.snr' }),
			...param('false_alarm_rate', falseAlarmPerYear, { '@unit': 'yr-1' })
		]
	};
}

/** VOEvent's times are UTC by the coordinate system and carry no zone. */
function timeOf(iso: string): string {
	return new Date(iso).toISOString().replace('Z', '');
}
