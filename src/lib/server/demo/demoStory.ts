import type { AlertPacket } from '../../domain/alertPacket';
import type { Equatorial } from '../../sky/angle';
import { radiusFromSigma, sigmaFromRadius } from '../../sky/regions/containment';
import type { CircleShape } from '../../sky/regions/shape';
import { offset } from '../../sky/vector';
import type { DemoRandom } from './demoRandom';
import type { DemoStreamCode } from './demoStreams';

/** Which instruments saw it, in order of arrival. */
export const STORY_KINDS = [
	'gamma',
	'gammaUpdated',
	'gammaWide',
	'gammaWideNarrow',
	'wide',
	'wideNarrow'
] as const;
export type StoryKind = (typeof STORY_KINDS)[number];

/** The demo's streams send circles only. */
type CirclePacket = Omit<AlertPacket, 'shape'> & { shape?: CircleShape };

export type StoryPacket = { stream: DemoStreamCode; packet: CirclePacket; receivedMs: number };

/** One invented transient: what is really in the sky and what the instruments said of it. */
export type Story = {
	t0Ms: number;
	source: Equatorial;
	/** R magnitude of the fading counterpart 1 h after T0. */
	magAtOneHour: number;
	packets: StoryPacket[];
};

type StoryPlan = {
	kind: StoryKind;
	t0Ms: number;
	source: Equatorial;
	firstDelayS: number;
	isTest?: boolean;
	isRetracted?: boolean;
};

const CONTAINMENT = 0.9;
const FADE_MEAN_MAG = 21.2;
const FADE_SPREAD_MAG = 1.8;
const SYSTEMATIC_DEG: Record<DemoStreamCode, number> = {
	tambour: 0.5,
	carapace: 0.01,
	needle: 0.0003
};
const PREFIX: Record<DemoStreamCode, string> = { tambour: 'TB', carapace: 'CP', needle: 'ND' };

/** Draws the packets of a story: error circles whose centres scatter about the source as they claim to. */
export function planStory(random: DemoRandom, plan: StoryPlan): Story {
	const { t0Ms, source, kind } = plan;
	const role = plan.isTest ? 'test' : 'observation';
	const packets: StoryPacket[] = [];
	let atMs = t0Ms;
	const say = (
		stream: DemoStreamCode,
		afterS: number,
		radiusDeg: number | null,
		more: Partial<CirclePacket> = {}
	) => {
		atMs += afterS * 1000;
		packets.push({
			stream,
			receivedMs: Math.round(atMs),
			packet: {
				packetId: packetIdOf(stream, t0Ms),
				serial: 1,
				role,
				kind: 'report',
				cites: [],
				t0: new Date(t0Ms).toISOString(),
				...(radiusDeg === null ? {} : { shape: measured(random, source, stream, radiusDeg) }),
				significance: round(random.between(5, 22), 1),
				falseAlarmPerYear: round(10 ** random.between(-3, 0.3), 4),
				remarks: '',
				...more
			}
		});
	};
	const citing = (stream: DemoStreamCode): Partial<CirclePacket> => ({
		cites: [{ stream, packetId: packetIdOf(stream, t0Ms), relation: 'followup' }]
	});

	if (kind.startsWith('gamma')) {
		say('tambour', plan.firstDelayS, random.between(2.5, 7));
		if (kind === 'gammaUpdated') {
			say('tambour', random.between(60, 400), random.between(1.2, 2.5), {
				serial: 2,
				kind: 'update',
				remarks: 'Ground analysis.'
			});
		}
		if (kind === 'gammaWide' || kind === 'gammaWideNarrow') {
			const more = random.next() < 0.5 ? citing('tambour') : {};
			say('carapace', random.between(90, 600), random.between(1, 3) / 60, more);
		}
	} else {
		say('carapace', plan.firstDelayS, random.between(1, 3) / 60);
	}
	if (kind.endsWith('Narrow')) {
		say('needle', random.between(400, 2400), random.between(2, 5) / 3600, citing('carapace'));
	}
	if (plan.isRetracted) {
		const first = packets[0]!;
		say(first.stream, random.between(900, 5000), null, {
			serial: 9,
			kind: 'retraction',
			cites: [{ stream: first.stream, packetId: first.packet.packetId, relation: 'retraction' }],
			significance: undefined,
			falseAlarmPerYear: undefined,
			remarks: 'Particle event in the detector.'
		});
	}
	return {
		t0Ms,
		source,
		magAtOneHour: FADE_MEAN_MAG + FADE_SPREAD_MAG * random.normal(),
		packets
	};
}

function packetIdOf(stream: DemoStreamCode, t0Ms: number): string {
	const at = new Date(t0Ms).toISOString();
	return `${PREFIX[stream]}-${at.slice(0, 10).replaceAll('-', '')}-${at.slice(11, 19).replaceAll(':', '')}`;
}

/** An error circle as a stream reports it: its centre off by a draw from its own errors. */
function measured(
	random: DemoRandom,
	source: Equatorial,
	stream: DemoStreamCode,
	radiusDeg: number
): CircleShape {
	const systematicDeg = SYSTEMATIC_DEG[stream];
	const sigmaDeg = Math.hypot(sigmaFromRadius(radiusDeg, CONTAINMENT), systematicDeg);
	// The radius of a 2-D Gaussian that holds a uniform draw of its probability.
	const offDeg = radiusFromSigma(sigmaDeg, random.between(0.02, 0.97));
	const centre = offset(source, offDeg, random.between(0, 360));
	const digits = Math.max(2, Math.ceil(3 - Math.log10(radiusDeg)));
	return {
		kind: 'circle',
		centre: { raDeg: round(centre.raDeg, digits) % 360, decDeg: round(centre.decDeg, digits) },
		radiusDeg: Number(radiusDeg.toPrecision(3)),
		containment: CONTAINMENT,
		systematicDeg
	};
}

export function round(value: number, digits: number): number {
	return Number(value.toFixed(digits));
}
