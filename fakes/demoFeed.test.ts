import { Body, GeoVector } from 'astronomy-engine';
import { describe, expect, it } from 'vitest';
import { alertPacketSchema } from '../src/lib/domain/alertPacket';
import { separationDeg, toEquatorial } from '../src/lib/sky/vector';
import { XMLParser } from 'fast-xml-parser';
import { drawStory, planStory, type Story } from './demoEvents';
import { runFeed, type FeedOptions } from './demoFeed';
import { antisolarPosition, measuredCircle, seededDraw } from './demoSky';
import { demoVoEvent } from './demoVoEvent';
import { serveLoopback, readBody, type Answer } from './loopbackServer';

const T0_MS = Date.UTC(2026, 11, 1, 3, 41, 27);
const STORIES: Story[] = ['localised', 'imaged', 'gammaOnly', 'refined', 'retracted', 'test'];

describe('a measured circle', () => {
	it.each([
		{ radiusDeg: 8, containment: 0.9 },
		{ radiusDeg: 3 / 3600, containment: 0.9 },
		{ radiusDeg: 25, containment: 0.5 }
	])('holds its source as often as it says, $radiusDeg°', (errors) => {
		const draw = seededDraw(7);
		const truth = { raDeg: 359.999, decDeg: -71 };
		const count = 4000;
		let inside = 0;
		for (let i = 0; i < count; i += 1) {
			const { centre } = measuredCircle(draw, truth, errors);
			if (separationDeg(centre, truth) <= errors.radiusDeg) inside += 1;
		}
		// Three standard deviations of the binomial count.
		const tolerance = 3 * Math.sqrt((errors.containment * (1 - errors.containment)) / count);
		expect(Math.abs(inside / count - errors.containment)).toBeLessThan(tolerance);
	});
});

describe('a story', () => {
	it('is made of packets the API takes, far from the Sun, with one identifier a burst', () => {
		const draw = seededDraw(11);
		const sun = toEquatorial(GeoVector(Body.Sun, new Date(T0_MS), true));
		for (let i = 0; i < 60; i += 1) {
			for (const story of STORIES) {
				for (const { packet } of planStory(draw, story, T0_MS)) {
					expect(alertPacketSchema.parse(packet)).toEqual(packet);
					if (packet.shape?.kind === 'circle') {
						expect(separationDeg(packet.shape.centre, sun)).toBeGreaterThan(90);
					}
				}
			}
		}
	});

	it('keeps away from what is happening already', () => {
		const awayFrom = antisolarPosition(seededDraw(5), T0_MS);
		for (let seed = 0; seed < 200; seed += 1) {
			const positions = planStory(seededDraw(seed), 'localised', T0_MS, awayFrom).flatMap(
				({ stream, packet }) =>
					stream === 'needle' && packet.shape?.kind === 'circle' ? [packet.shape.centre] : []
			);
			expect(positions.length).toBeGreaterThan(0);
			for (const centre of positions) expect(separationDeg(centre, awayFrom)).toBeGreaterThan(34);
		}
	});

	it('narrows a burst from degrees to arcminutes to arcseconds within 90 s', () => {
		const planned = planStory(seededDraw(3), 'localised', T0_MS).filter(
			({ delayS }) => delayS !== 12
		);
		expect(planned.map(({ stream, delayS }) => [stream, delayS])).toEqual([
			['tambour', 0],
			['carapace', 30],
			['needle', 75]
		]);
		const radiiDeg = planned.map(({ packet }) =>
			packet.shape?.kind === 'circle' ? packet.shape.radiusDeg : NaN
		);
		expect(radiiDeg[0]).toBeGreaterThanOrEqual(1);
		expect(radiiDeg[1]! * 60).toBeGreaterThan(0.9);
		expect(radiiDeg[1]! * 60).toBeLessThan(3.1);
		expect(radiiDeg[2]! * 3600).toBeGreaterThan(1.9);
		expect(radiiDeg[2]! * 3600).toBeLessThan(5.1);
		expect(planned[1]!.packet.cites).toMatchObject([{ relation: 'followup', stream: 'tambour' }]);
	});

	it('repeats with its seed, and every kind comes up', () => {
		const draws = (seed: number) => {
			const draw = seededDraw(seed);
			return Array.from({ length: 200 }, () => drawStory(draw));
		};
		expect(draws(5)).toEqual(draws(5));
		expect(new Set(draws(5))).toEqual(new Set(STORIES));
	});
});

describe('a VOEvent', () => {
	const parser = new XMLParser({ ignoreAttributes: false, removeNSPrefix: true });
	const read = (xml: string) =>
		(parser.parse(xml, true) as { VOEvent: Record<string, unknown> }).VOEvent;
	const planned = (outcome: 'update' | 'retraction') => {
		for (let seed = 1; ; seed += 1) {
			const packets = planStory(seededDraw(seed), 'imaged', T0_MS);
			const found = packets.filter(({ packet }) => packet.kind === outcome);
			if (found.length > 0) return packets.filter(({ stream }) => stream === 'carapace');
		}
	};

	it('says where and when, how sure and what it follows', () => {
		const { packet } = planned('update')[0]!;
		if (packet.shape?.kind !== 'circle') throw new Error('an image is a circle');
		const { centre, radiusDeg } = packet.shape;
		expect(read(demoVoEvent(packet, new Date(T0_MS + 30_000)))).toMatchObject({
			'@_version': '2.0',
			'@_role': 'observation',
			'@_ivorn': 'ivo://carapace.example/alerts#CP-20261201-034127',
			Who: { AuthorIVORN: 'ivo://carapace.example/alerts', Date: '2026-12-01T03:41:57.000' },
			What: {
				Group: {
					'@_name': 'detection',
					Param: [
						{ '@_name': 'significance', '@_value': String(packet.significance) },
						{ '@_name': 'false_alarm_rate', '@_value': String(packet.falseAlarmPerYear) }
					]
				}
			},
			WhereWhen: {
				ObsDataLocation: {
					ObservationLocation: {
						AstroCoordSystem: { '@_id': 'UTC-ICRS-GEO' },
						AstroCoords: {
							'@_coord_system_id': 'UTC-ICRS-GEO',
							Time: { TimeInstant: { ISOTime: '2026-12-01T03:41:27.000' } },
							Position2D: {
								'@_unit': 'deg',
								Value2: { C1: centre.raDeg, C2: centre.decDeg },
								Error2Radius: radiusDeg
							}
						}
					}
				}
			},
			Citations: {
				EventIVORN: {
					'@_cite': 'followup',
					'#text': 'ivo://tambour.example/alerts#TB-20261201-034127'
				}
			}
		});
	});

	it.each([
		['update', 'supersedes'],
		['retraction', 'retraction']
	] as const)('of kind %s is a packet of its own and cites what it replaces', (kind, cite) => {
		const [first, second] = planned(kind);
		const xml = read(demoVoEvent(second!.packet, new Date(T0_MS)));
		expect(xml['@_ivorn']).not.toBe(first!.packet.packetId);
		expect(xml.Citations).toEqual({
			EventIVORN: { '@_cite': cite, '#text': first!.packet.packetId }
		});
		expect(JSON.stringify(xml).includes('Position2D')).toBe(kind === 'update');
	});

	it('is not made of what VOEvent can’t say', () => {
		const { packet } = planned('update')[0]!;
		expect(() => demoVoEvent({ ...packet, serial: 2 }, new Date())).toThrow(/can’t be written/);
	});
});

describe('the feed', () => {
	type Seen = { path: string; key: string; body: string };

	/** Runs the feed on a clock that only its own waits advance, until `packets` were answered. */
	const feedInto = async (packets: number, statusOf: (call: number) => number) => {
		const seen: Seen[] = [];
		const lines: string[] = [];
		const waitsMs: number[] = [];
		const stop = new AbortController();
		// The application and the broker in one: their addresses differ by the path alone.
		const server = await serveLoopback(async (request, { pathname }): Promise<Answer> => {
			const body = (await readBody(request)).toString('utf8');
			seen.push({ path: pathname, key: request.headers.authorization ?? '', body });
			return { status: statusOf(seen.length), json: {} };
		}, 0);
		let clockMs = T0_MS;
		const options: FeedOptions = {
			origin: server.origin,
			brokerUrl: `${server.origin}/broker`,
			keys: { tambour: 'kt', carapace: 'kc', needle: 'kn' },
			draw: seededDraw(21),
			log: (line) => {
				lines.push(line);
				if (lines.length === packets) stop.abort();
			},
			signal: stop.signal,
			sleep: async (ms, signal) => {
				signal.throwIfAborted();
				waitsMs.push(ms);
				clockMs += ms;
			},
			now: () => clockMs
		};
		await runFeed(options);
		await server.close();
		return { seen, lines, waitsMs, elapsedMs: clockMs - T0_MS };
	};

	it('posts each packet with its stream’s key, or to the broker, the first within 20 s', async () => {
		const { seen, waitsMs } = await feedInto(12, () => 201);
		expect(waitsMs[0]).toBeLessThan(20_000);
		const keyOf: Record<string, string> = { tambour: 'Bearer kt', needle: 'Bearer kn' };
		const streams = seen.map(({ path, key, body }) => {
			if (path === '/broker/api/events') {
				expect(key).toBe('');
				expect(body).toMatch(
					/<voe:VOEvent [^>]* ivorn="ivo:\/\/carapace\.example\/alerts#CP-[\d-]+"/
				);
				return 'carapace';
			}
			expect(path).toBe('/api/v1/alerts');
			const { packetId } = alertPacketSchema.parse(JSON.parse(body));
			const [, stream] = /^ivo:\/\/(\w+)\.example\//.exec(packetId)!;
			expect(key).toBe(keyOf[stream!]);
			return stream;
		});
		expect(new Set(streams)).toEqual(new Set(['tambour', 'carapace', 'needle']));
	});

	it('backs off while the server fails and then sends the same packet', async () => {
		const { seen, lines, waitsMs } = await feedInto(4, (call) => (call < 4 ? 503 : 201));
		expect(new Set(seen.slice(0, 4).map(({ body }) => body)).size).toBe(1);
		expect(waitsMs.filter((ms) => ms > 0).slice(1, 4)).toEqual([2000, 4000, 8000]);
		expect(lines[3]).toContain('taken');
	});

	it('goes on with the next packet after a refusal', async () => {
		const { seen, lines } = await feedInto(2, (call) => (call === 1 ? 422 : 201));
		expect(lines[0]).toContain('answered 422');
		expect(seen[1]!.body).not.toEqual(seen[0]!.body);
	});
});
