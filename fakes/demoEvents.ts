import type { AlertPacket } from '../src/lib/domain/alertPacket';
import type { Equatorial } from '../src/lib/sky/angle';
import { separationDeg } from '../src/lib/sky/vector';
import { demoIvorn } from './demoVoEvent';
import { antisolarPosition, between, measuredCircle, type Draw } from './demoSky';

export type DemoStream = 'tambour' | 'carapace' | 'needle';

/** One packet of a story, to be posted `delayS` after the story's first. */
export type PlannedPacket = { delayS: number; stream: DemoStream; packet: AlertPacket };

/** What happens on the sky: how far a source is localised, or what else a stream may send. */
export type Story = 'localised' | 'imaged' | 'gammaOnly' | 'refined' | 'retracted' | 'test';

const PREFIX: Record<DemoStream, string> = { tambour: 'TB', carapace: 'CP', needle: 'ND' };

// Chosen so that an hour of the demo shows most of what the streams can send.
const SHARES: [Story, number][] = [
	['gammaOnly', 0.3],
	['imaged', 0.22],
	['refined', 0.15],
	['localised', 0.13],
	['retracted', 0.1],
	['test', 0.1]
];
const RESEND_SHARE = 0.15;
/** Of the images that no X-ray position follows, how many are looked at again: then improved, or withdrawn. */
const IMAGE_IMPROVED_SHARE = 0.4;
const IMAGE_WITHDRAWN_SHARE = 0.15;

/** Two bursts further apart than this are never taken for one. */
const AWAY_DEG = 35;

/** Draws the next story by how often each occurs. */
export function drawStory(draw: Draw): Story {
	let left = draw();
	for (const [story, share] of SHARES) {
		left -= share;
		if (left < 0) return story;
	}
	return 'gammaOnly';
}

/**
 * The packets of one story whose burst was at `t0Ms`: every centre is drawn from its declared error
 * about one true position, which lies in the half of the sky opposite the Sun and not near `awayFrom`.
 */
export function planStory(
	draw: Draw,
	story: Story,
	t0Ms: number,
	awayFrom: Equatorial | null = null
): PlannedPacket[] {
	let truth = antisolarPosition(draw, t0Ms);
	while (awayFrom && separationDeg(truth, awayFrom) < AWAY_DEG) {
		truth = antisolarPosition(draw, t0Ms);
	}
	const first = gammaReport(draw, truth, t0Ms, story === 'test' ? 'test' : 'observation');
	const planned: PlannedPacket[] = [{ delayS: 0, stream: 'tambour', packet: first }];
	const followup = (cited: { stream: DemoStream; packetId: string }) => [
		{ ...cited, relation: 'followup' as const }
	];

	if (story === 'refined') {
		planned.push({
			delayS: Math.round(between(draw, 40, 90)),
			stream: 'tambour',
			packet: {
				...gammaReport(draw, truth, t0Ms, 'observation', 0.4),
				packetId: first.packetId,
				serial: 2,
				kind: 'update',
				cites: [{ stream: 'tambour', packetId: first.packetId, relation: 'supersedes' }],
				remarks: 'Ground analysis of the full event data.'
			}
		});
	}
	if (story === 'imaged' || story === 'localised') {
		const image = xrayReport(draw, truth, t0Ms, 'carapace', between(draw, 1, 3) / 60, {
			significance: between(draw, 7, 25),
			cites: followup({ stream: 'tambour', packetId: first.packetId }),
			remarks: 'Fading source inside the gamma-ray circle.'
		});
		planned.push({ delayS: 30, stream: 'carapace', packet: image });
		if (story === 'localised') {
			const position = xrayReport(draw, truth, t0Ms, 'needle', between(draw, 2, 5) / 3600, {
				significance: between(draw, 12, 60),
				cites: followup({ stream: 'carapace', packetId: image.packetId }),
				remarks: 'Uncatalogued, fading X-ray source.'
			});
			planned.push({ delayS: 75, stream: 'needle', packet: position });
		} else {
			planned.push(...imageRevisited(draw, truth, t0Ms, image));
		}
	}
	if (story === 'retracted') {
		planned.push({
			delayS: Math.round(between(draw, 60, 150)),
			stream: 'tambour',
			packet: {
				packetId: first.packetId,
				serial: 2,
				role: 'observation',
				kind: 'retraction',
				cites: [{ stream: 'tambour', packetId: first.packetId, relation: 'retraction' }],
				t0: first.t0,
				remarks: 'Particle background, not a burst.'
			}
		});
	}
	if (draw() < RESEND_SHARE) {
		// Networks deliver twice now and then: the same packet must stay one alert.
		planned.push({ delayS: 12, stream: 'tambour', packet: first });
	}
	return planned.sort((a, b) => a.delayS - b.delayS);
}

/** What the ground makes of an image; packets of VOEvent streams have no serials but cite what they replace. */
function imageRevisited(
	draw: Draw,
	truth: Equatorial,
	t0Ms: number,
	image: AlertPacket
): PlannedPacket[] {
	const outcome = draw();
	const delayS = Math.round(between(draw, 70, 140));
	const packetId = `${image.packetId}-2`;
	if (outcome < IMAGE_IMPROVED_SHARE) {
		const packet: AlertPacket = {
			...xrayReport(draw, truth, t0Ms, 'carapace', between(draw, 0.4, 0.9) / 60, {
				significance: between(draw, 10, 30),
				cites: [{ stream: 'carapace', packetId: image.packetId, relation: 'supersedes' }],
				remarks: 'Position from all of the exposure.'
			}),
			packetId,
			kind: 'update'
		};
		return [{ delayS, stream: 'carapace', packet }];
	}
	if (outcome > 1 - IMAGE_WITHDRAWN_SHARE) {
		const packet: AlertPacket = {
			packetId,
			serial: 1,
			role: 'observation',
			kind: 'retraction',
			cites: [{ stream: 'carapace', packetId: image.packetId, relation: 'retraction' }],
			t0: image.t0,
			remarks: 'Scattered light, not a source.'
		};
		return [{ delayS, stream: 'carapace', packet }];
	}
	return [];
}

function gammaReport(
	draw: Draw,
	truth: Equatorial,
	t0Ms: number,
	role: AlertPacket['role'],
	scale = 1
): AlertPacket {
	// Faint bursts are common and badly placed: radii between 1° and 10°, most of them a few degrees.
	const radiusDeg = round(scale * 10 ** (between(draw, 0, 1) ** 1.2), 1);
	const isTest = role === 'test';
	return {
		packetId: packetIdOf('tambour', t0Ms),
		serial: 1,
		role,
		kind: 'report',
		cites: [],
		t0: new Date(t0Ms).toISOString(),
		shape: measuredCircle(draw, truth, {
			radiusDeg: Math.min(10, Math.max(1, radiusDeg)),
			containment: 0.9,
			systematicDeg: round(scale * between(draw, 0.3, 0.9), 1)
		}),
		significance: round(between(draw, 5.5, 15), 1),
		falseAlarmPerYear: round(10 ** between(draw, -2, 0.5), 2),
		remarks: isTest ? 'Test of the alert chain. Not an observation.' : 'On-board localisation.'
	};
}

function xrayReport(
	draw: Draw,
	truth: Equatorial,
	t0Ms: number,
	stream: DemoStream,
	radiusDeg: number,
	rest: Pick<AlertPacket, 'cites' | 'remarks'> & { significance: number }
): AlertPacket {
	return {
		packetId: packetIdOf(stream, t0Ms),
		serial: 1,
		role: 'observation',
		kind: 'report',
		cites: rest.cites,
		t0: new Date(t0Ms).toISOString(),
		shape: measuredCircle(draw, truth, {
			radiusDeg: Number(radiusDeg.toPrecision(3)),
			containment: 0.9
		}),
		significance: round(rest.significance, 1),
		falseAlarmPerYear: round(10 ** between(draw, -3, -1), 4),
		remarks: rest.remarks
	};
}

/**
 * An IVORN, as streams cite each other by it: stream prefix, date and time of day of T0, unique over restarts,
 * as bursts are minutes apart.
 */
function packetIdOf(stream: DemoStream, t0Ms: number): string {
	const digits = new Date(t0Ms).toISOString().replace(/\D/g, '');
	return demoIvorn(stream, `${PREFIX[stream]}-${digits.slice(0, 8)}-${digits.slice(8, 14)}`);
}

function round(value: number, digits: number): number {
	return Number(value.toFixed(digits));
}
