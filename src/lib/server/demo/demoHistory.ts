import type { DemoRandom } from './demoRandom';
import { lognormalDelays } from './demoRandom';
import { answerStory, type Answer, type Bookings, type Fate, type StepDelays } from './demoAnswer';
import { anywhere, networkSky, visiblePosition } from './demoNetwork';
import { planStory, type StoryKind } from './demoStory';
import { triageStory, type TriagedStory } from './demoTriage';

/** One transient of the demo with everything that happened to it up to now. */
export type Chapter = {
	triaged: TriagedStory;
	answer: Answer;
	isTest: boolean;
	isDrill: boolean;
	state: 'open' | 'closed' | 'retracted';
	closedMs: number | null;
};

const MINUTE_MS = 60_000;
const HOUR_MS = 60 * MINUTE_MS;
const DAY_MS = 24 * HOUR_MS;
const HISTORY_DAYS = 89.5;
/** A transient leaves the board 72 h after T0, so the history ends before the open ones begin. */
const OPEN_HOURS = 72;
const HISTORY_ENDS_HOURS = 76;
const DROPPED_STAYS_MINUTES = 30;
const LOOK_AHEAD_HOURS = 22;
const DAY_S = 86_400;

/** Invented response times, in the proportions of a team spread over the world. */
const STEPS = {
	receivedS: { medianS: 22, ninetyPercentS: 108, most: DAY_S },
	takenS: { medianS: 160, ninetyPercentS: 665, most: 5 * 3600 },
	decidedS: { medianS: 190, ninetyPercentS: 860, most: 3 * 3600 },
	claimedS: { medianS: 242, ninetyPercentS: 2280, most: 4 * 3600 },
	exposedS: { medianS: 260, ninetyPercentS: 5000, most: 8 * 3600 },
	reportedS: { medianS: 2880, ninetyPercentS: 15_000, most: 12 * 3600 },
	circularS: { medianS: 1020, ninetyPercentS: 5400, most: 10 * 3600 }
};
const LEAST_EXPOSED_S = 70;
const LEAST_REPORTED_S = 480;

// prettier-ignore
const FATES: [Fate | 'retracted', number][] = [
	['whole', 37], ['uncirculated', 3], ['unreported', 2], ['lost', 2], ['unclaimed', 1],
	['parked', 5], ['dropped', 6], ['undecided', 2], ['retracted', 2]
];
const KIND_SHARES: [StoryKind, number][] = [
	['gamma', 12],
	['gammaUpdated', 9],
	['gammaWide', 17],
	['gammaWideNarrow', 8],
	['wide', 8],
	['wideNarrow', 6]
];

/** Plays 90 days of the demo's network up to `nowMs`: closed transients, tests, a drill and two open ones. */
export function playHistory(random: DemoRandom, nowMs: number): Chapter[] {
	const bookings: Bookings = new Map();
	const fates = random.shuffled(FATES.flatMap(([fate, count]) => repeated(fate, count)));
	const kinds = random.shuffled(KIND_SHARES.flatMap(([kind, count]) => repeated(kind, count)));
	const count = fates.length;
	const hardness = Array.from({ length: count }, random.normal);
	const delays = Object.fromEntries(
		Object.entries(STEPS).map(([step, spread]) => [
			step,
			lognormalDelays(random, hardness, spread).map((delayS) => Math.min(delayS, spread.most))
		])
	) as Record<keyof typeof STEPS, number[]>;
	const startMs = nowMs - HISTORY_DAYS * DAY_MS;
	const spanMs = HISTORY_DAYS * DAY_MS - HISTORY_ENDS_HOURS * HOUR_MS;

	const plans: ChapterPlan[] = fates.map((fate, index) => ({
		t0Ms: startMs + ((index + random.next()) / count) * spanMs,
		// A retraction closes a transient only when nothing else was heard of it.
		kind: fate === 'retracted' ? 'gamma' : kinds[index % kinds.length]!,
		fate: fate === 'retracted' ? 'whole' : fate,
		isRetracted: fate === 'retracted',
		telescopesWanted: fate === 'unclaimed' ? 0 : Math.ceil(random.between(0, 3)),
		slotCount: random.pick([1, 1, 2, 2, 3, 4]),
		receivedS: delays.receivedS[index]!,
		delays: {
			takenS: delays.takenS[index]!,
			decidedS: delays.decidedS[index]!,
			claimedS: delays.claimedS[index]!,
			exposedS: Math.max(LEAST_EXPOSED_S, delays.exposedS[index]!),
			reportedS: Math.max(LEAST_REPORTED_S, delays.reportedS[index]!),
			circularS: delays.circularS[index]!
		}
	}));
	return [...plans, ...testsAndDrill(startMs), ...openOnes(nowMs)]
		.sort((a, b) => a.t0Ms - b.t0Ms)
		.map((plan) => playChapter(random, plan, bookings, nowMs));
}

type ChapterPlan = {
	t0Ms: number;
	kind: StoryKind;
	fate: Fate;
	telescopesWanted: number;
	slotCount: number;
	receivedS: number;
	delays: StepDelays;
	isRetracted?: boolean;
	isTest?: boolean;
	isDrill?: boolean;
};

const BRISK: StepDelays = {
	takenS: 95,
	decidedS: 120,
	claimedS: 150,
	exposedS: 240,
	reportedS: 2100,
	circularS: 900
};

function testsAndDrill(startMs: number): ChapterPlan[] {
	const common = { telescopesWanted: 2, slotCount: 1, receivedS: 15, delays: BRISK };
	return [
		{ ...common, t0Ms: startMs + 20.4 * DAY_MS, kind: 'gamma', fate: 'untaken', isTest: true },
		{ ...common, t0Ms: startMs + 61.7 * DAY_MS, kind: 'gammaWide', fate: 'untaken', isTest: true },
		{
			...common,
			t0Ms: startMs + 40.2 * DAY_MS,
			kind: 'gammaWide',
			fate: 'uncirculated',
			isTest: true,
			isDrill: true
		}
	];
}

/** What the board still shows: one parked some hours ago, and last night's success. */
function openOnes(nowMs: number): ChapterPlan[] {
	return [
		{
			t0Ms: nowMs - 14.1 * HOUR_MS,
			kind: 'gammaWideNarrow',
			fate: 'whole',
			telescopesWanted: 4,
			slotCount: 4,
			receivedS: 19,
			delays: BRISK
		},
		{
			t0Ms: nowMs - 3.9 * HOUR_MS,
			kind: 'gamma',
			fate: 'parked',
			telescopesWanted: 3,
			slotCount: 1,
			receivedS: 31,
			delays: { ...BRISK, takenS: 210, decidedS: 340 }
		}
	];
}

function playChapter(
	random: DemoRandom,
	plan: ChapterPlan,
	bookings: Bookings,
	nowMs: number
): Chapter {
	const { isTest = false, isDrill = false, isRetracted = false } = plan;
	const t0Ms = Math.round(plan.t0Ms);
	const windowsOf = networkSky(t0Ms, LOOK_AHEAD_HOURS);
	const source =
		plan.telescopesWanted > 0
			? visiblePosition(random, windowsOf, t0Ms + 10 * MINUTE_MS, {
					telescopes: plan.telescopesWanted
				})
			: anywhere(random);
	const { kind, receivedS } = plan;
	const story = planStory(random, {
		kind,
		t0Ms,
		source,
		firstDelayS: receivedS,
		isTest,
		isRetracted
	});
	const triaged = triageStory(story);
	const seenFrom = triaged.regions.at(-1)?.joint.centre ?? source;
	const answer = answerStory(random, triaged, windowsOf(seenFrom), plan, bookings);
	const { state, closedMs } = endOf(random, triaged, answer, nowMs);
	return { triaged, answer: upTo(answer, nowMs), isTest, isDrill, state, closedMs };
}

function endOf(
	random: DemoRandom,
	{ story, retractedMs }: TriagedStory,
	{ decided }: Answer,
	nowMs: number
): Pick<Chapter, 'state' | 'closedMs'> {
	if (retractedMs !== null) return { state: 'retracted', closedMs: retractedMs };
	// The sweep that closes old ones runs every five minutes.
	const sweepMs = random.between(0, 5) * MINUTE_MS;
	const closedMs =
		sweepMs +
		(decided?.decision === 'drop'
			? decided.ms + DROPPED_STAYS_MINUTES * MINUTE_MS
			: story.t0Ms + OPEN_HOURS * HOUR_MS);
	return closedMs < nowMs ? { state: 'closed', closedMs } : { state: 'open', closedMs: null };
}

/** What of an answer has happened by `nowMs`; claims made before it stand. */
function upTo(answer: Answer, nowMs: number): Answer {
	const slots = answer.slots
		.filter((slot) => slot.claimedMs <= nowMs)
		.map((slot) => {
			if (slot.report && slot.report.reportedMs > nowMs) {
				const onSky = slot.onSkyMs !== null && slot.onSkyMs <= nowMs;
				return {
					...slot,
					report: null,
					endedMs: null,
					onSkyMs: onSky ? slot.onSkyMs : null,
					state: onSky ? ('on sky' as const) : ('claimed' as const)
				};
			}
			return slot;
		});
	const circular = answer.circular && answer.circular.ms <= nowMs ? answer.circular : null;
	return { ...answer, slots, circular };
}

function repeated<T>(item: T, count: number): T[] {
	return Array.from({ length: count }, () => item);
}
