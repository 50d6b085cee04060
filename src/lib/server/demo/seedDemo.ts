import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { App } from '../app';
import type { Equatorial } from '../../sky/angle';
import { takeIn } from '../packets/takeInService';
import { alert, stream, streamKey } from '../db/schema/alerts';
import { person } from '../db/schema/people';
import type { Transaction } from '../db/database';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { requestAllOutlooks } from '../outlook/outlookRequests';
import { hashStreamKey } from '../streams/streamKeyService';
import { playHistory } from './demoHistory';
import { networkSky, visiblePosition } from './demoNetwork';
import { seedPeople, seedSubscriptions } from './demoPeople';
import { demoRandom } from './demoRandom';
import { seedRota } from './demoRota';
import { insertChapters } from './demoRows';
import { planStory } from './demoStory';
import {
	DEMO_KEY_LABEL,
	DEMO_STREAM_CODES,
	seedBroker,
	seedStreamKeys,
	seedStreams
} from './demoStreams';
import { seedClosures, seedTelescopes } from './demoTelescopes';

export type SeedResult = {
	/** False when the demo was there already. */
	made: boolean;
	transients: number;
	/** Stream keys in clear; null when the ones known to the caller still hold. */
	keys: Record<string, string> | null;
	/** Where the transient is that this run began; the feed's bursts keep away from it. */
	happening: Equatorial | null;
};

/** Any fixed number: two seeds at once wait for each other. */
const SEED_LOCK = 732_018_336;
const RANDOM_SEED = 20_261_201;
const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;
const JOINED_DAYS_AGO = 92;
/** The transient that is happening now began this long ago. */
const NOW_T0_AGO_MS = 4.3 * MINUTE_MS;
/** Marks the packets of it. */
const NOW_REMARKS = 'Demo: happening now.';

/**
 * Fills an empty database with the demo: people, telescopes, streams, rota, 90 days of history and one
 * transient that is happening now. A second run makes no second copy; it gives new stream keys when
 * `knownKeys` no longer hold.
 */
export async function seedDemo(
	app: App,
	knownKeys: Record<string, string> | null
): Promise<SeedResult> {
	const now = app.now();
	const seeded = await writeTransaction(app, async (tx, change) => {
		await tx.execute(sql`select pg_advisory_xact_lock(${SEED_LOCK})`);
		const streams = await tx
			.select({ id: stream.id, code: stream.code })
			.from(stream)
			.where(inArray(stream.code, [...DEMO_STREAM_CODES]));
		if (streams.length > 0) {
			const ids = new Map(streams.map(({ id, code }) => [code, id]));
			return { made: false, transients: 0, keys: await renewKeys(tx, ids, knownKeys, now) };
		}
		await refuseRealPeople(tx);
		change.touchNetwork();
		return { made: true, ...(await seedAll(tx, now)) };
	});
	const { demoBroker } = app.config;
	if (demoBroker) await writeTransaction(app, (tx) => seedBroker(tx, demoBroker));
	const happening = await beginHappeningNow(app, +now);
	if (seeded.made) await requestAllOutlooks(app);
	return { ...seeded, happening };
}

async function seedAll(
	tx: Transaction,
	now: Date
): Promise<{ transients: number; keys: Record<string, string> }> {
	const joinedAt = new Date(+now - JOINED_DAYS_AGO * DAY_MS);
	const people = await seedPeople(tx, joinedAt);
	const telescopeIds = await seedTelescopes(tx, people, joinedAt);
	await seedClosures(tx, people, telescopeIds, +now);
	await seedSubscriptions(tx, people, telescopeIds, joinedAt);
	const streamIds = await seedStreams(tx, joinedAt);
	await seedRota(tx, people, +now);
	const chapters = playHistory(demoRandom(RANDOM_SEED), +now);
	await insertChapters(tx, chapters, { people, telescopeIds, streamIds });
	return { transients: chapters.length, keys: await seedStreamKeys(tx, streamIds, now) };
}

/** The demo signs anybody in as its people: it is not mixed with real ones. */
async function refuseRealPeople(tx: Transaction): Promise<void> {
	const [real] = await tx.select({ id: person.id }).from(person).limit(1);
	if (real) {
		throw new DomainError(
			'wrongState',
			'This database holds people who are not the demo’s. Seed the demo into an empty database.'
		);
	}
}

async function renewKeys(
	tx: Transaction,
	streamIds: Map<string, string>,
	knownKeys: Record<string, string> | null,
	now: Date
): Promise<Record<string, string> | null> {
	const hashes = DEMO_STREAM_CODES.flatMap((code) => {
		const key = knownKeys?.[code];
		return key ? [hashStreamKey(key)] : [];
	});
	if (hashes.length === DEMO_STREAM_CODES.length) {
		const holding = await tx
			.select({ id: streamKey.id })
			.from(streamKey)
			.where(and(inArray(streamKey.hash, hashes), isNull(streamKey.revokedAt)));
		if (holding.length === hashes.length) return null;
	}
	await tx
		.update(streamKey)
		.set({ revokedAt: now })
		.where(
			and(
				eq(streamKey.label, DEMO_KEY_LABEL),
				inArray(streamKey.streamId, [...streamIds.values()]),
				isNull(streamKey.revokedAt)
			)
		);
	return seedStreamKeys(tx, streamIds, now);
}

/** A coarse circle some minutes ago and an X-ray position since, through the door that real packets use. */
async function beginHappeningNow(app: App, nowMs: number): Promise<Equatorial | null> {
	const [begun] = await app.database
		.select({ id: alert.id })
		.from(alert)
		.where(eq(alert.remarks, NOW_REMARKS))
		.limit(1);
	if (begun) return null;
	const random = demoRandom(RANDOM_SEED + 1);
	const t0Ms = Math.floor((nowMs - NOW_T0_AGO_MS) / 1000) * 1000;
	const source = visiblePosition(random, networkSky(nowMs, 6), nowMs, {
		telescopes: 4,
		maxAbsDecDeg: 40
	});
	const story = planStory(random, { kind: 'gammaWide', t0Ms, source, firstDelayS: 22 });
	const streams = await app.database.select().from(stream);
	const receivedMs = [t0Ms + 22_000, t0Ms + 185_000];
	for (const [index, { stream: code, packet }] of story.packets.entries()) {
		const source = streams.find((one) => one.code === code);
		if (!source) continue;
		const marked = { ...packet, remarks: NOW_REMARKS };
		await takeIn({ ...app, now: () => new Date(receivedMs[index]!) }, source, {
			body: Buffer.from(JSON.stringify(marked, null, 2)),
			contentType: 'application/json',
			channel: 'api'
		});
	}
	return source;
}
