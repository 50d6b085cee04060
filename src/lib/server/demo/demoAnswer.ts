import type { Decision, ReportKind, SlotState } from '../../domain/vocabulary';
import type { Equatorial } from '../../sky/angle';
import type { PlannedTile } from '../../sky/outlook/outlook';
import { offset } from '../../sky/vector';
import { DEMO_PEOPLE } from './demoPeople';
import type { NetworkWindows } from './demoNetwork';
import type { DemoRandom } from './demoRandom';
import { dutyAt } from './demoRota';
import { DEMO_FADE } from './demoStreams';
import { round } from './demoStory';
import type { DemoTelescope } from './demoTelescopes';
import { demoTiles, fadedMag, limitMagOf, tilesHold } from './demoTiles';
import { regionAt, type TriagedStory } from './demoTriage';

/** How far the team came with a transient. */
export type Fate =
	| 'untaken'
	| 'undecided'
	| 'parked'
	| 'dropped'
	| 'unclaimed'
	| 'lost'
	| 'unreported'
	| 'uncirculated'
	| 'whole';

/** Waiting times of one transient, seconds, each from the step before. */
export type StepDelays = {
	takenS: number;
	decidedS: number;
	claimedS: number;
	exposedS: number;
	reportedS: number;
	circularS: number;
};

export type StoryReport = {
	kind: ReportKind;
	filter: string;
	observedMs: number;
	exposureS: number | null;
	magnitude: number | null;
	magnitudeError: number | null;
	limitMag: number | null;
	position: Equatorial | null;
	remarks: string;
	reportedMs: number;
};

export type StorySlot = {
	telescope: DemoTelescope;
	observer: string;
	startMs: number;
	endMs: number;
	state: SlotState;
	tiles: PlannedTile[];
	filter: string;
	exposureS: number;
	catch: number;
	regionVersion: number;
	claimedMs: number;
	onSkyMs: number | null;
	endedMs: number | null;
	report: StoryReport | null;
};

/** What people did about a transient; initials stand for people. */
export type Answer = {
	taken: { by: string; ms: number } | null;
	decided: { by: string; ms: number; decision: Decision; reason: string } | null;
	slots: StorySlot[];
	circular: { by: string; ms: number } | null;
};

/** Stretches in which a telescope is spoken for, by code; `answerStory` adds to it. */
export type Bookings = Map<string, { startMs: number; endMs: number }[]>;

const MINUTE_MS = 60_000;
const LEAST_SLOT_MS = 15 * MINUTE_MS;
const REASONS: Record<'parked' | 'dropped', string[]> = {
	parked: ['Wait for a smaller region', 'Moon too close, look again tomorrow'],
	dropped: [
		'In the plane, soft: likely a flare star',
		'Known variable in the circle',
		'Too near the Sun'
	]
};

/** Plays a team's answer to a triaged story; every exposure lies in a real window of its telescope. */
export function answerStory(
	random: DemoRandom,
	triaged: TriagedStory,
	visible: NetworkWindows,
	plan: { fate: Fate; delays: StepDelays; slotCount: number },
	bookings: Bookings
): Answer {
	const { fate, delays } = plan;
	const answer: Answer = { taken: null, decided: null, slots: [], circular: null };
	if (fate === 'untaken') return answer;
	const takenMs = triaged.alerts[0]!.receivedMs + delays.takenS * 1000;
	if (triaged.retractedMs !== null && takenMs >= triaged.retractedMs) return answer;
	const by = dutyAt(takenMs).first;
	answer.taken = { by, ms: takenMs };
	const decidedMs = takenMs + delays.decidedS * 1000;
	if (fate === 'undecided' || (triaged.retractedMs ?? Infinity) <= decidedMs) return answer;
	if (fate === 'parked' || fate === 'dropped') {
		const decision = fate === 'parked' ? 'park' : 'drop';
		answer.decided = { by, ms: decidedMs, decision, reason: random.pick(REASONS[fate]) };
		return answer;
	}
	answer.decided = { by, ms: decidedMs, decision: 'chase', reason: '' };
	if (fate === 'unclaimed' || triaged.retractedMs !== null) return answer;

	const claimMs = decidedMs + delays.claimedS * 1000;
	const first = claimSlot(random, triaged, visible, bookings, {
		claimMs,
		fromMs: claimMs + delays.exposedS * 1000,
		reportAfterMs: delays.reportedS * 1000,
		outcome: fate === 'lost' ? 'lost' : fate === 'unreported' ? 'silent' : 'reported'
	});
	if (!first) return answer;
	answer.slots.push(first);
	const firstReportMs = first.report?.reportedMs;
	if (fate === 'lost' || fate === 'unreported' || !firstReportMs) return answer;
	for (let more = 1; more < plan.slotCount; more++) {
		const laterMs = claimMs + random.between(5, 90) * MINUTE_MS;
		const further = claimSlot(random, triaged, visible, bookings, {
			claimMs: laterMs,
			fromMs: Math.max(laterMs + 2 * MINUTE_MS, firstReportMs + random.between(1, 40) * MINUTE_MS),
			reportAfterMs: random.between(30, 240) * MINUTE_MS,
			outcome: random.next() < 0.15 ? 'lost' : 'reported'
		});
		if (further) answer.slots.push(further);
	}
	if (fate === 'whole') {
		answer.circular = { by, ms: firstReportMs + delays.circularS * 1000 };
	}
	return answer;
}

type ClaimPlan = {
	claimMs: number;
	fromMs: number;
	reportAfterMs: number;
	outcome: 'reported' | 'lost' | 'silent';
};

function claimSlot(
	random: DemoRandom,
	triaged: TriagedStory,
	visible: NetworkWindows,
	bookings: Bookings,
	{ claimMs, fromMs, reportAfterMs, outcome }: ClaimPlan
): StorySlot | null {
	const place = findPlace(random, triaged, visible, bookings, claimMs, fromMs);
	if (!place) return null;
	const { telescope, observer, onSkyMs, endMs } = place;
	const startMs = Math.max(claimMs, onSkyMs - MINUTE_MS);
	bookings.set(telescope.code, [...(bookings.get(telescope.code) ?? []), { startMs, endMs }]);
	const { story } = triaged;
	const region = regionAt(triaged, claimMs);
	const tiles = demoTiles(
		telescope,
		region.joint,
		{ t0Ms: story.t0Ms, startMs: onSkyMs, endMs },
		DEMO_FADE
	);
	const slot: StorySlot = {
		telescope,
		observer,
		startMs,
		endMs,
		state: 'reported',
		tiles,
		filter: telescope.depths[0]!.filter,
		exposureS: telescope.exposureS,
		catch: tiles.reduce((sum, tile) => sum + tile.probability * tile.detectChance, 0),
		regionVersion: region.version,
		claimedMs: claimMs,
		onSkyMs,
		endedMs: null,
		report: null
	};
	if (outcome === 'silent') return { ...slot, state: 'on sky' };
	if (outcome === 'lost') {
		const reportedMs = onSkyMs + random.between(10, 60) * MINUTE_MS;
		const report = lossReport(random, slot, reportedMs);
		return { ...slot, onSkyMs: null, endedMs: reportedMs, report };
	}
	const report = exposureReport(random, triaged, slot, onSkyMs + reportAfterMs);
	return { ...slot, endedMs: report.reportedMs, report };
}

/** The telescope and observer that get to the region first after `fromMs`, inside a window and unbooked. */
function findPlace(
	random: DemoRandom,
	triaged: TriagedStory,
	visible: NetworkWindows,
	bookings: Bookings,
	claimMs: number,
	fromMs: number
): { telescope: DemoTelescope; observer: string; onSkyMs: number; endMs: number } | null {
	const lengthMs = random.between(25, 80) * MINUTE_MS;
	const wide = regionAt(triaged, claimMs).joint.equivalentRadiusDeg > 0.4;
	const found = visible.flatMap(({ telescope, windows }) => {
		const observers = DEMO_PEOPLE.filter((one) => one.telescopes?.includes(telescope.code));
		if (observers.length === 0) return [];
		const booked = bookings.get(telescope.code) ?? [];
		return windows.flatMap((window) => {
			const onSkyMs = Math.max(window.startMs, fromMs);
			const endMs = Math.min(window.endMs, onSkyMs + lengthMs);
			const free = booked.every(
				(other) => other.endMs <= Math.max(claimMs, onSkyMs - MINUTE_MS) || other.startMs >= endMs
			);
			if (endMs - onSkyMs < LEAST_SLOT_MS || !free) return [];
			// A narrow field is of no use on a wide region; otherwise the larger mirror is preferred.
			const unfit = wide ? telescope.apertureM * 40 : -telescope.apertureM * 10;
			const rankMs = onSkyMs + (unfit + random.between(0, 30)) * MINUTE_MS;
			return [{ telescope, observer: random.pick(observers).initials, onSkyMs, endMs, rankMs }];
		});
	});
	found.sort((a, b) => a.rankMs - b.rankMs);
	return found[0] ?? null;
}

function lossReport(random: DemoRandom, slot: StorySlot, reportedMs: number): StoryReport {
	const weather = random.next() < 0.8;
	return {
		kind: weather ? 'weather' : 'technical',
		filter: slot.filter,
		observedMs: slot.startMs + MINUTE_MS,
		exposureS: null,
		magnitude: null,
		magnitudeError: null,
		limitMag: null,
		position: null,
		remarks: weather
			? random.pick(['Thick cloud.', 'Closed for humidity.', 'Wind above the limit.'])
			: random.pick(['Dome did not turn.', 'Camera did not answer.']),
		reportedMs
	};
}

function exposureReport(
	random: DemoRandom,
	{ story }: TriagedStory,
	slot: StorySlot,
	reportedMs: number
): StoryReport {
	const { telescope, filter, exposureS } = slot;
	const observedMs = slot.onSkyMs! + (exposureS * 1000) / 2;
	const limitMag = limitMagOf(telescope, filter, exposureS) - random.between(0, 0.4);
	const trueMag = fadedMag(story.magAtOneHour, observedMs - story.t0Ms);
	// Signal to noise 5 at the limit; 1.0857 = 2.5 / ln 10.
	const signalToNoise = 5 * 10 ** (0.4 * (limitMag - trueMag));
	const seen = signalToNoise >= 5 && tilesHold(telescope, slot.tiles, story.source);
	const errorMag = Math.max(0.02, 1.0857 / signalToNoise);
	return {
		kind: seen ? 'detection' : 'limit',
		filter,
		observedMs,
		exposureS,
		magnitude: seen ? round(trueMag + errorMag * random.normal(), 2) : null,
		magnitudeError: seen ? round(errorMag, 2) : null,
		limitMag: seen ? null : round(limitMag, 1),
		position: seen
			? offset(story.source, random.between(0, 0.4) / 3600, random.between(0, 360))
			: null,
		remarks: '',
		reportedMs: Math.max(reportedMs, observedMs + exposureS * 1000)
	};
}
