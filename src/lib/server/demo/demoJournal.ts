import { sinceT0 } from '../../domain/duration';
import { DECISION_LABELS } from '../../domain/vocabulary';
import { reportSummary } from '../reports/reportSummary';
import type { JournalEntry } from '../transients/journalStore';
import { formatArea } from '../../domain/area';
import type { Chapter } from './demoHistory';
import { DEMO_STREAMS } from './demoStreams';
import type { ChapterIds } from './demoRows';

/** The journal of one chapter, in the words and with the details of the live path, oldest first. */
export function chapterJournal(chapter: Chapter, ids: ChapterIds): JournalEntry[] {
	const { triaged, answer, closedMs, state } = chapter;
	const { t0Ms } = triaged.story;
	const entries: JournalEntry[] = [];
	const add = (
		kind: JournalEntry['kind'],
		ms: number,
		actorId: string | null,
		summary: string,
		detail: Record<string, unknown> = {}
	) =>
		entries.push({
			transientId: ids.transientId,
			kind,
			at: new Date(ms),
			actorId,
			summary,
			detail
		});

	for (const { packet, stream, receivedMs, alertId, membership, logOdds } of triaged.alerts) {
		const { name } = DEMO_STREAMS.find(({ code }) => code === stream)!;
		const retraction = packet.kind === 'retraction';
		const ways = {
			started: 'started this transient',
			cited: 'belongs to a packet that is here',
			joined: 'joined'
		};
		const way = retraction ? 'retraction' : ways[membership as keyof typeof ways];
		add(
			retraction ? 'alertRetracted' : 'alertReceived',
			receivedMs,
			null,
			`${name} ${packet.packetId}, serial ${packet.serial}: ${way}`,
			{ alertId, stream, t0: packet.t0, logOdds }
		);
	}
	triaged.regions.forEach(({ version, computedMs, cause, joint: { area90Deg2 } }, index) => {
		const before90Deg2 = triaged.regions[index - 1]?.joint.area90Deg2 ?? null;
		const now = `${formatArea(area90Deg2)} (90 %)`;
		const summary =
			before90Deg2 === null
				? `Joint region ${now}`
				: `Joint region now ${now}, was ${formatArea(before90Deg2)}`;
		add('regionChanged', computedMs, null, summary, { version, area90Deg2, before90Deg2, cause });
	});
	const { taken, decided, circular } = answer;
	if (taken) add('taken', taken.ms, ids.person(taken.by), `Taken at ${sinceT0(taken.ms - t0Ms)}`);
	if (decided) {
		const { decision, reason } = decided;
		add(
			'decided',
			decided.ms,
			ids.person(decided.by),
			`Decided: ${DECISION_LABELS[decision].toLowerCase()}${reason ? ` (${reason})` : ''}`,
			{ decision, before: null, reason }
		);
	}
	answer.slots.forEach((slot, index) => {
		const { telescope, claimedMs, onSkyMs, report } = slot;
		const actorId = ids.person(slot.observer);
		const detail = { slotId: ids.slotIds[index]!, telescopeId: ids.telescope(telescope.code) };
		add(
			'slotClaimed',
			claimedMs,
			actorId,
			`Claimed ${telescope.name} from ${clock(slot.startMs)} to ${clock(slot.endMs)} UTC`,
			{ ...detail, telescope: telescope.code, sinceT0: sinceT0(claimedMs - t0Ms) }
		);
		if (onSkyMs !== null) {
			add('onSky', onSkyMs, actorId, `${telescope.name} is on sky`, detail);
		}
		if (report) {
			const { kind, filter, magnitude, magnitudeError, limitMag } = report;
			const said = reportSummary({
				kind,
				filter,
				magnitude: magnitude ?? undefined,
				magnitudeError: magnitudeError ?? undefined,
				limitMag: limitMag ?? undefined
			});
			add('reported', report.reportedMs, actorId, `${telescope.name}: ${said}`, {
				...detail,
				reportId: ids.reportIds[index]!,
				kind
			});
		}
	});
	if (circular && ids.circular) {
		const { number, id, title } = ids.circular;
		const summary = `published circular ${number}: ${title}`;
		add('circularPublished', circular.ms, ids.person(circular.by), summary, {
			number,
			circularId: id
		});
	}
	if (closedMs !== null) {
		if (state === 'retracted') {
			add('retracted', closedMs, null, 'Closed as retracted: no live alert is left');
		} else {
			const dropped = decided?.decision === 'drop';
			add(
				'closed',
				closedMs,
				null,
				dropped ? 'Closed after it was dropped' : 'Closed 72 h after T0'
			);
		}
	}
	return entries.sort((a, b) => +a.at - +b.at);
}

function clock(ms: number): string {
	return new Date(ms).toISOString().slice(11, 16);
}
