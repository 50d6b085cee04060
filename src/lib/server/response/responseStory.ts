import type { JournalKind } from '../../domain/vocabulary';

/** What the journal holds of one transient that response times are made from, oldest first. */
export type ResponseStory = {
	t0Ms: number;
	entries: ResponseEntry[];
};

export type ResponseEntry = {
	kind: JournalKind;
	atMs: number;
	decision: string | null;
	stream: string | null;
	telescopeId: string | null;
	/** A partner's report says nothing of how fast the team was. */
	byPartner: boolean;
};

/** The journal kinds that are milestones or end a wait. */
export const RESPONSE_KINDS = [
	'alertReceived',
	'taken',
	'decided',
	'slotClaimed',
	'slotReleased',
	'slotLapsed',
	'onSky',
	'reported',
	'circularPublished',
	'retracted',
	'closed'
] as const satisfies JournalKind[];

/** When each milestone was first passed, UTC milliseconds; null for those not passed. */
export type Milestones = {
	t0: number;
	received: number | null;
	taken: number | null;
	decided: number | null;
	/** The first decision to chase: from here on, somebody should claim. */
	chased: number | null;
	claimed: number | null;
	exposed: number | null;
	/** First report at or after the first exposure. */
	reported: number | null;
	/** First circular at or after that report; an earlier one can't have told of it. */
	circular: number | null;
	/** Closed or retracted: every wait ends here without an answer. */
	closed: number | null;
	/** The last decision was to park or drop: the waits that follow a decision end here. */
	setAside: number | null;
};

export function milestonesOf({ t0Ms, entries }: ResponseStory): Milestones {
	const decisions = entries.filter(({ kind }) => kind === 'decided');
	const last = decisions.at(-1);
	const exposed = firstAt(entries, 'onSky');
	const own = entries.filter(({ byPartner }) => !byPartner);
	const reported = exposed === null ? null : firstAt(own, 'reported', exposed);
	return {
		t0: t0Ms,
		received: firstAt(entries, 'alertReceived'),
		taken: firstAt(entries, 'taken'),
		decided: decisions[0]?.atMs ?? null,
		chased: decisions.find(({ decision }) => decision === 'chase')?.atMs ?? null,
		claimed: firstAt(entries, 'slotClaimed'),
		exposed,
		reported,
		circular: reported === null ? null : firstAt(entries, 'circularPublished', reported),
		closed: earliest(firstAt(entries, 'retracted'), firstAt(entries, 'closed')),
		setAside: last && last.decision !== 'chase' ? last.atMs : null
	};
}

/** The same for one telescope: its own claim, exposure and report. */
export function telescopeMilestones(story: ResponseStory, telescopeId: string): Milestones {
	const whole = milestonesOf(story);
	const own = story.entries.filter((entry) => entry.telescopeId === telescopeId);
	const exposed = firstAt(own, 'onSky');
	const reported = exposed === null ? null : firstAt(own, 'reported', exposed);
	const lastHold = own.findLast(({ kind }) =>
		['slotClaimed', 'slotReleased', 'slotLapsed'].includes(kind)
	);
	const givenUp =
		exposed === null && lastHold && lastHold.kind !== 'slotClaimed' ? lastHold.atMs : null;
	return {
		...whole,
		claimed: firstAt(own, 'slotClaimed'),
		exposed,
		reported,
		circular: reported === null ? null : firstAt(story.entries, 'circularPublished', reported),
		setAside: earliest(whole.setAside, givenUp)
	};
}

export function telescopesOf({ entries }: ResponseStory): string[] {
	const claims = entries.filter(({ kind }) => kind === 'slotClaimed');
	return [...new Set(claims.flatMap(({ telescopeId }) => telescopeId ?? []))];
}

/** The stream that was heard first. */
export function streamOf({ entries }: ResponseStory): string | null {
	return entries.find(({ kind, stream }) => kind === 'alertReceived' && stream)?.stream ?? null;
}

/** Entries may be dated back (a report says when its exposure began), so order is not taken on trust. */
function firstAt(
	entries: ResponseEntry[],
	kind: JournalKind,
	notBeforeMs = -Infinity
): number | null {
	let first: number | null = null;
	for (const entry of entries) {
		if (entry.kind === kind && entry.atMs >= notBeforeMs) first = earliest(first, entry.atMs);
	}
	return first;
}

function earliest(a: number | null, b: number | null): number | null {
	if (a === null) return b;
	return b === null ? a : Math.min(a, b);
}
