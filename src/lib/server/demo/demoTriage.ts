import { randomUUID } from 'node:crypto';
import type { Membership } from '../../domain/vocabulary';
import { jointRegion, type JointRegion } from '../../sky/regions/jointRegion';
import type { LivePart } from '../alerts/alertStore';
import { logOddsOfAgreement, logOddsOfBelonging } from '../alerts/association';
import { DEMO_STREAMS } from './demoStreams';
import type { Story, StoryPacket } from './demoStory';

/** An alert of a story as triage would have placed it. */
export type StoryAlert = StoryPacket & {
	alertId: string;
	membership: Membership;
	logOdds: number | null;
	live: boolean;
};

/** One version of a story's joint region. */
export type StoryRegion = {
	version: number;
	computedMs: number;
	cause: string;
	alertCount: number;
	logOddsAgreement: number | null;
	joint: JointRegion;
};

export type TriagedStory = {
	story: Story;
	alerts: StoryAlert[];
	regions: StoryRegion[];
	retractedMs: number | null;
};

/** Follows a story's packets as the live path does: membership, joint regions, agreement, retraction. */
export function triageStory(story: Story): TriagedStory {
	const alerts: StoryAlert[] = [];
	const regions: StoryRegion[] = [];
	let retractedMs: number | null = null;
	for (const heard of story.packets) {
		const { packet, stream, receivedMs } = heard;
		const settings = DEMO_STREAMS.find(({ code }) => code === stream)!;
		const cited = packet.serial > 1 || packet.cites.length > 0;
		const known = livePartsOf(alerts);
		const membership: Membership = alerts.length === 0 ? 'started' : cited ? 'cited' : 'joined';
		const logOdds =
			membership === 'joined' && packet.shape
				? logOddsOfBelonging(known, packet.shape, settings)
				: null;
		for (const earlier of alerts) {
			if (earlier.stream === stream && earlier.packet.packetId === packet.packetId) {
				earlier.live = false;
			}
		}
		const live = packet.kind !== 'retraction';
		alerts.push({ ...heard, alertId: randomUUID(), membership, logOdds, live });
		const parts = livePartsOf(alerts);
		if (parts.length === 0) {
			retractedMs = receivedMs;
			break;
		}
		regions.push({
			version: regions.length + 1,
			computedMs: receivedMs,
			cause: `${settings.name} ${packet.packetId}, serial ${packet.serial}`,
			alertCount: parts.length,
			logOddsAgreement: logOddsOfAgreement(parts),
			joint: jointRegion(parts.map(({ shape }) => shape))
		});
	}
	return { story, alerts, regions, retractedMs };
}

/** The joint region that was in force at an instant after the first alert. */
export function regionAt({ regions }: TriagedStory, ms: number): StoryRegion {
	return regions.findLast(({ computedMs }) => computedMs <= ms) ?? regions[0]!;
}

function livePartsOf(alerts: StoryAlert[]): LivePart[] {
	return alerts.flatMap(({ alertId, live, packet, stream }) => {
		if (!live || !packet.shape) return [];
		const { alertsPerYear, coincidenceWindowS } = DEMO_STREAMS.find(({ code }) => code === stream)!;
		const t0 = new Date(packet.t0);
		return [
			{ alertId, t0, shape: packet.shape, streamCode: stream, alertsPerYear, coincidenceWindowS }
		];
	});
}
