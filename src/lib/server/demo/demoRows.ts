import { createHash, randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { circleSky } from '../alerts/alertSky';
import type { Transaction } from '../db/database';
import { alert, packet, stream } from '../db/schema/alerts';
import { report, slot } from '../db/schema/slots';
import { designationCounter, journal, region, transient } from '../db/schema/transients';
import { designationOf } from '../transients/designation';
import { chapterCircular, insertCirculars } from './demoCircular';
import { inChunks } from './inChunks';
import type { Chapter } from './demoHistory';
import { chapterJournal } from './demoJournal';
import type { SeededPeople } from './demoPeople';
import type { DemoStreamCode } from './demoStreams';

/** Ids of the rows that a chapter becomes. */
export type ChapterIds = {
	transientId: string;
	designation: string;
	slotIds: string[];
	reportIds: (string | null)[];
	circular: { id: string; number: number; title: string; body: string } | null;
	person: (initials: string) => string;
	telescope: (code: string) => string;
};

export type SeededNetwork = {
	people: SeededPeople;
	telescopeIds: Map<string, string>;
	streamIds: Map<DemoStreamCode, string>;
};

/** Writes the chapters as the live path would have left them. */
export async function insertChapters(
	tx: Transaction,
	chapters: Chapter[],
	network: SeededNetwork
): Promise<void> {
	const known = nameChapters(chapters, network);
	const counters = new Map<string, number>();
	for (const { triaged } of chapters) {
		const day = dayOf(triaged.story.t0Ms);
		counters.set(day, (counters.get(day) ?? 0) + 1);
	}
	await tx.insert(designationCounter).values([...counters].map(([day, last]) => ({ day, last })));
	await inChunks(known.map(transientRow), (rows) => tx.insert(transient).values(rows));
	await insertAlerts(tx, known, network);
	await inChunks(known.flatMap(regionRows), (rows) => tx.insert(region).values(rows));
	await inChunks(known.flatMap(slotRows), (rows) => tx.insert(slot).values(rows));
	await inChunks(known.flatMap(reportRows), (rows) => tx.insert(report).values(rows));
	await insertCirculars(tx, known, network.people);
	const entries = known.flatMap(({ chapter, ids }) => chapterJournal(chapter, ids));
	await inChunks(
		entries.sort((a, b) => +a.at - +b.at),
		(rows) => tx.insert(journal).values(rows)
	);
}

/** A chapter and the rows it becomes. */
export type KnownChapter = { chapter: Chapter; ids: ChapterIds };

/** Gives designations in order of arrival and circular numbers in order of publication. */
function nameChapters(
	chapters: Chapter[],
	{ people, telescopeIds }: SeededNetwork
): KnownChapter[] {
	const countByDay = new Map<string, number>();
	const arrived = [...chapters].sort(
		(a, b) => a.triaged.alerts[0]!.receivedMs - b.triaged.alerts[0]!.receivedMs
	);
	const known = arrived.map((chapter): KnownChapter => {
		const { t0Ms } = chapter.triaged.story;
		const index = (countByDay.get(dayOf(t0Ms)) ?? 0) + 1;
		countByDay.set(dayOf(t0Ms), index);
		return {
			chapter,
			ids: {
				transientId: randomUUID(),
				designation: designationOf(new Date(t0Ms), index),
				slotIds: chapter.answer.slots.map(() => randomUUID()),
				reportIds: chapter.answer.slots.map(({ report }) => (report ? randomUUID() : null)),
				circular: null,
				person: (initials) => people.get(initials)!.id,
				telescope: (code) => telescopeIds.get(code)!
			}
		};
	});
	known
		.filter(({ chapter }) => chapter.answer.circular)
		.sort((a, b) => a.chapter.answer.circular!.ms - b.chapter.answer.circular!.ms)
		.forEach(({ chapter, ids }, index) => {
			const text = chapterCircular(chapter, ids.designation);
			ids.circular = { id: randomUUID(), number: index + 1, ...text };
		});
	return known;
}

function transientRow({ chapter, ids }: KnownChapter): typeof transient.$inferInsert {
	const { triaged, answer, state, isTest, isDrill } = chapter;
	const { taken, decided } = answer;
	return {
		id: ids.transientId,
		designation: ids.designation,
		t0: new Date(triaged.story.t0Ms),
		firstReceivedAt: new Date(triaged.alerts[0]!.receivedMs),
		state,
		isTest,
		isDrill,
		takenBy: taken ? ids.person(taken.by) : null,
		takenAt: taken ? new Date(taken.ms) : null,
		decision: decided?.decision ?? null,
		decidedBy: decided ? ids.person(decided.by) : null,
		decidedAt: decided ? new Date(decided.ms) : null,
		decisionReason: decided?.reason ?? '',
		regionVersion: triaged.regions.length
	};
}

async function insertAlerts(
	tx: Transaction,
	known: KnownChapter[],
	{ streamIds }: SeededNetwork
): Promise<void> {
	const received = known.flatMap(({ chapter, ids }) =>
		chapter.triaged.alerts.map((one) => {
			const body = Buffer.from(JSON.stringify(one.packet, null, 2));
			const sha256 = createHash('sha256').update(body).digest('hex');
			return { one, body, sha256, transientId: ids.transientId };
		})
	);
	const stored = await tx
		.insert(packet)
		.values(
			received.map(({ one, body, sha256 }) => ({
				streamId: streamIds.get(one.stream)!,
				contentType: 'application/json',
				body,
				sha256,
				receivedAt: new Date(one.receivedMs),
				state: 'taken' as const,
				judgedAt: new Date(one.receivedMs)
			}))
		)
		.returning({ id: packet.id, sha256: packet.sha256 });
	const rawIds = new Map(stored.map(({ id, sha256 }) => [sha256, id]));
	await inChunks(
		received.map(({ one, sha256, transientId }) => {
			const { packetId, serial, role, kind, cites, t0, shape, remarks } = one.packet;
			return {
				id: one.alertId,
				streamId: streamIds.get(one.stream)!,
				packetId,
				serial,
				rawId: rawIds.get(sha256)!,
				role,
				kind,
				cites,
				t0: new Date(t0),
				receivedAt: new Date(one.receivedMs),
				shape: shape ?? null,
				moc90: circleSky(shape ?? null),
				significance: one.packet.significance ?? null,
				falseAlarmPerYear: one.packet.falseAlarmPerYear ?? null,
				remarks,
				transientId,
				membership: one.membership,
				logOdds: one.logOdds,
				live: one.live
			};
		}),
		(rows) => tx.insert(alert).values(rows)
	);
	for (const [code, id] of streamIds) {
		const times = received
			.filter(({ one }) => one.stream === code)
			.map(({ one }) => one.receivedMs);
		if (times.length === 0) continue;
		const lastHeardAt = new Date(Math.max(...times));
		await tx.update(stream).set({ lastHeardAt }).where(eq(stream.id, id));
	}
}

function regionRows({ chapter, ids }: KnownChapter): (typeof region.$inferInsert)[] {
	return chapter.triaged.regions.map(({ joint, computedMs, ...row }) => ({
		transientId: ids.transientId,
		version: row.version,
		computedAt: new Date(computedMs),
		cause: row.cause,
		alertCount: row.alertCount,
		logOddsAgreement: row.logOddsAgreement,
		method: joint.method,
		raDeg: joint.centre.raDeg,
		decDeg: joint.centre.decDeg,
		sigmaDeg: joint.sigmaDeg,
		area50Deg2: joint.area50Deg2,
		area90Deg2: joint.area90Deg2,
		equivalentRadiusDeg: joint.equivalentRadiusDeg,
		points: joint.points,
		moc50: joint.moc50,
		moc90: joint.moc90
	}));
}

function slotRows({ chapter, ids }: KnownChapter): (typeof slot.$inferInsert)[] {
	return chapter.answer.slots.map((one, index) => ({
		id: ids.slotIds[index]!,
		transientId: ids.transientId,
		telescopeId: ids.telescope(one.telescope.code),
		during: { start: new Date(one.startMs), end: new Date(one.endMs) },
		state: one.state,
		tiles: one.tiles,
		filter: one.filter,
		exposureS: one.exposureS,
		catch: one.catch,
		regionVersion: one.regionVersion,
		claimedBy: ids.person(one.observer),
		claimedAt: new Date(one.claimedMs),
		onSkyAt: one.onSkyMs === null ? null : new Date(one.onSkyMs),
		endedAt: one.endedMs === null ? null : new Date(one.endedMs),
		createdAt: new Date(one.claimedMs)
	}));
}

function reportRows({ chapter, ids }: KnownChapter): (typeof report.$inferInsert)[] {
	return chapter.answer.slots.flatMap((one, index) => {
		if (!one.report) return [];
		const { position, observedMs, reportedMs, ...values } = one.report;
		return [
			{
				...values,
				id: ids.reportIds[index]!,
				slotId: ids.slotIds[index]!,
				transientId: ids.transientId,
				telescopeId: ids.telescope(one.telescope.code),
				observedAt: new Date(observedMs),
				raDeg: position?.raDeg ?? null,
				decDeg: position?.decDeg ?? null,
				reportedBy: ids.person(one.observer),
				reportedAt: new Date(reportedMs)
			}
		];
	});
}

function dayOf(ms: number): string {
	return new Date(ms).toISOString().slice(0, 10);
}
