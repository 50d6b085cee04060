import { eq } from 'drizzle-orm';
import type { CircularRecord, RecordedReport } from '../circulars/circularRecord';
import { circularText } from '../circulars/circularText';
import type { Transaction } from '../db/database';
import { circular, circularCounter, delivery } from '../db/schema/circulars';
import type { Chapter } from './demoHistory';
import { DEMO_PEOPLE, type SeededPeople } from './demoPeople';
import type { KnownChapter } from './demoRows';
import { DEMO_STREAMS } from './demoStreams';
import { regionAt } from './demoTriage';
import { inChunks } from './inChunks';

const DELIVERY_MS = 9_000;
const RETRIED_DELIVERY_MS = 190_000;
/** Every so many deliveries needed a second try, or failed for good. */
const RETRIED_EVERY = 23;
const FAILED_EVERY = 41;

/** Title and text of a chapter's circular, written from what was known when it went out. */
export function chapterCircular(
	{ triaged, answer: { slots, circular } }: Chapter,
	designation: string
): { title: string; body: string } {
	const { by, ms } = circular!;
	const { name, organisation, email } = DEMO_PEOPLE.find(({ initials }) => initials === by)!;
	const { joint, alertCount, logOddsAgreement } = regionAt(triaged, ms);
	const { centre, area50Deg2, area90Deg2, equivalentRadiusDeg } = joint;
	const record: CircularRecord = {
		designation,
		t0: new Date(triaged.story.t0Ms),
		now: new Date(ms),
		retracted: false,
		alerts: triaged.alerts
			.filter(({ receivedMs }) => receivedMs <= ms)
			.map(({ stream, packet, receivedMs, live }) => ({
				streamName: DEMO_STREAMS.find(({ code }) => code === stream)!.name,
				packetId: packet.packetId,
				receivedAt: new Date(receivedMs),
				shape: packet.shape ?? null,
				significance: packet.significance ?? null,
				live
			})),
		region: { centre, alertCount, area50Deg2, area90Deg2, equivalentRadiusDeg, logOddsAgreement },
		reports: slots.flatMap(({ telescope, report }): RecordedReport[] => {
			if (!report || report.reportedMs > ms) return [];
			if (report.kind !== 'detection' && report.kind !== 'limit') return [];
			const { kind, filter, exposureS, magnitude, magnitudeError, limitMag, position } = report;
			const observedAt = new Date(report.observedMs);
			const observerText = telescope.name;
			return [
				{
					kind,
					observerText,
					filter,
					observedAt,
					exposureS,
					magnitude,
					magnitudeError,
					limitMag,
					position
				}
			];
		}),
		next: slots
			.filter((slot) => slot.claimedMs <= ms && slot.endMs > ms && (slot.endedMs ?? Infinity) > ms)
			.map((slot) => ({
				telescopeText: slot.telescope.name,
				startAt: new Date(slot.startMs),
				endAt: new Date(slot.endMs),
				filter: slot.filter
			})),
		author: { name, organisation, email }
	};
	return circularText(record);
}

/** Writes the circulars with their deliveries to the subscribed partners. */
export async function insertCirculars(
	tx: Transaction,
	known: KnownChapter[],
	people: SeededPeople
): Promise<void> {
	const partners = [...people.values()].filter(({ person }) => person.roles.includes('partner'));
	const published = known.filter(({ ids }) => ids.circular);
	const circulars = published.map(({ chapter, ids }) => {
		const { by, ms } = chapter.answer.circular!;
		const { id, number, title, body } = ids.circular!;
		const publishedAt = new Date(ms);
		const authorId = ids.person(by);
		return {
			id,
			number,
			transientId: ids.transientId,
			title,
			body,
			authorId,
			createdAt: publishedAt,
			publishedAt
		};
	});
	await inChunks(circulars, (rows) => tx.insert(circular).values(rows));
	await tx
		.update(circularCounter)
		.set({ last: circulars.length })
		.where(eq(circularCounter.series, 'circular'));
	const wanted = published.flatMap(({ chapter, ids }) => {
		const codes: string[] = chapter.triaged.alerts.map(({ stream }) => stream);
		return partners
			.filter(({ person: { streamCodes = [] } }) =>
				streamCodes.length === 0 ? true : streamCodes.some((code) => codes.includes(code))
			)
			.map(({ id }) => ({
				circularId: ids.circular!.id,
				personId: id,
				ms: chapter.answer.circular!.ms
			}));
	});
	await inChunks(
		wanted.map(({ circularId, personId, ms }, index) => {
			const failed = index % FAILED_EVERY === FAILED_EVERY - 1;
			const retried = index % RETRIED_EVERY === RETRIED_EVERY - 1;
			const tookMs = failed || retried ? RETRIED_DELIVERY_MS : DELIVERY_MS;
			return {
				circularId,
				personId,
				channel: 'email' as const,
				state: failed ? ('failed' as const) : ('sent' as const),
				attempts: failed ? 6 : retried ? 2 : 1,
				lastError: failed ? '550 mailbox unavailable' : null,
				queuedAt: new Date(ms),
				endedAt: new Date(ms + tookMs + (index % 7) * 1000)
			};
		}),
		(rows) => tx.insert(delivery).values(rows)
	);
}
