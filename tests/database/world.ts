import { parseConfig } from '../../src/lib/server/config';
import type { Actor } from '../../src/lib/server/actor';
import type { App } from '../../src/lib/server/app';
import type { Reception } from '../../src/lib/server/alerts/alertService';
import { writeTransaction } from '../../src/lib/server/db/writeTransaction';
import { takeIn } from '../../src/lib/server/packets/takeInService';
import { connectDatabase } from '../../src/lib/server/db/database';
import { stream } from '../../src/lib/server/db/schema/alerts';
import { telescope, telescopeObserver } from '../../src/lib/server/db/schema/network';
import { person } from '../../src/lib/server/db/schema/people';
import type { Job, Queue } from '../../src/lib/server/jobs/queue';
import type { AuthenticatedStream } from '../../src/lib/server/streams/streamKeyService';
import type { Role, StreamClass } from '../../src/lib/domain/vocabulary';
import { outlookText } from '../../src/lib/server/outlook/outlookText';
import { computeOutlook } from '../../src/lib/sky/outlook/computeOutlook';
import { searchedRegion } from '../../src/lib/sky/catch/searchedRegion';
import { jointRegion } from '../../src/lib/sky/regions/jointRegion';
import { fileShape, mapShape, regionFile } from '../../src/compute';
import { logBayesFactor, logBayesOfJoining } from '../../src/lib/sky/regions/agreement';
import { mocOutline } from '../../src/lib/sky/moc/mocOutline';
import { memoryStore } from './memoryStore';
import { createTestDatabase } from './testDatabase';

/** A winter night in which Cerro Almendra (30° S, 70° W) is dark and Orion is up. */
export const NIGHT = new Date('2026-12-01T04:12:40Z');

/**
 * An App on a database of its own, with a clock that tests move and a queue that they run by hand.
 * The computations run in this thread.
 */
export async function openWorld(start = NIGHT) {
	const testDatabase = await createTestDatabase();
	const connection = connectDatabase(testDatabase.url, 40);
	let nowMs = start.getTime();
	const waiting: { job: Job<unknown>; payload: unknown }[] = [];
	const queue: Queue = {
		enqueue: (_tx, job, payload) => {
			waiting.push({ job: job as Job<unknown>, payload: job.payload.parse(payload) });
			return Promise.resolve();
		}
	};
	const app: App = {
		config: parseConfig({
			DATABASE_URL: testDatabase.url,
			ORIGIN: 'http://127.0.0.1:4180',
			AUTH_SECRET: 'x'.repeat(32),
			SMTP_URL: 'smtp://127.0.0.1:1'
		}),
		database: connection.database,
		pool: connection.pool,
		queue,
		compute: {
			outlook: (input) => Promise.resolve(computeOutlook(structuredClone(input))),
			outlookText: (input) => Promise.resolve(outlookText(structuredClone(input))),
			jointRegion: (parts) => Promise.resolve(jointRegion(parts)),
			searchedRegion: ({ shapes, reports, t0Ms, fade }) =>
				Promise.resolve(searchedRegion(shapes, reports, t0Ms, fade)),
			logBayesFactor: (parts) => Promise.resolve(logBayesFactor(parts)),
			logBayesOfJoining: ({ parts, shape }) =>
				Promise.resolve(logBayesOfJoining(structuredClone(parts), shape)),
			outline: (moc) => Promise.resolve(mocOutline(moc)),
			mapShape: (source) => Promise.resolve(mapShape(source)),
			fileShape: async (load) => fileShape(await load()),
			regionFile: (input) => Promise.resolve(regionFile(structuredClone(input))),
			close: () => Promise.resolve()
		},
		files: memoryStore(),
		now: () => new Date(nowMs)
	};
	return {
		app,
		...makers(app),
		tick: (seconds: number) => void (nowMs += seconds * 1000),
		/** Runs what is queued, and what that queues, until nothing is left. */
		async runJobs(): Promise<string[]> {
			const names: string[] = [];
			for (let next = waiting.shift(); next; next = waiting.shift()) {
				names.push(next.job.name);
				await next.job.handle(app, next.payload);
			}
			return names;
		},
		waitingJobs: () => waiting.map((item) => item.job.name),
		/** What is queued, with its payload. */
		waiting: () => [...waiting],
		dropWaiting: () => void waiting.splice(0),
		close: async () => {
			await connection.close();
			await testDatabase.drop();
		}
	};
}

export type World = Awaited<ReturnType<typeof openWorld>>;

function makers(app: App) {
	let count = 0;
	const { database } = app;
	return {
		async person(...roles: Role[]): Promise<Actor> {
			count++;
			const [row] = await database
				.insert(person)
				.values({
					name: `Person ${count}`,
					initials: `P${count}`,
					email: `person${count}@example.org`,
					roles
				})
				.returning();
			return row!;
		},
		async stream(
			code: string,
			streamClass: StreamClass,
			alertsPerYear = 200
		): Promise<AuthenticatedStream> {
			const [row] = await database
				.insert(stream)
				.values({
					code,
					name: code[0]!.toUpperCase() + code.slice(1),
					streamClass,
					alertsPerYear,
					fade: { m1Mean: 22.2, m1Spread: 2.3, alpha: 1 }
				})
				.returning();
			return { streamId: row!.id, keyId: '', stream: row! };
		},
		async telescope(code: string, observers: Actor[] = [], values: Partial<NewTelescope> = {}) {
			const [row] = await database
				.insert(telescope)
				.values({ ...almendra(code), ...values })
				.returning();
			for (const observer of observers) {
				await database
					.insert(telescopeObserver)
					.values({ telescopeId: row!.id, personId: observer.id });
			}
			// As the service does: the board remembers telescopes until it is told.
			await writeTransaction(app, (_tx, change) => Promise.resolve(change.touchNetwork()));
			return row!;
		},
		/** Takes a packet in as the API route does once the key is known. */
		async receive(source: AuthenticatedStream, input: Record<string, unknown>): Promise<Reception> {
			const body = Buffer.from(JSON.stringify(input));
			const intake = await takeIn(app, source.stream, {
				body,
				contentType: 'application/json',
				channel: 'api'
			});
			if (intake.kind === 'noted') throw new Error(`noted only: ${intake.reason}`);
			return intake;
		}
	};
}

type NewTelescope = typeof telescope.$inferInsert;

function almendra(code: string): NewTelescope {
	return {
		code,
		name: `Telescope ${code}`,
		site: 'Cerro Almendra',
		apertureM: 1.5,
		latDeg: -30.2,
		lonDeg: -70.7,
		heightM: 2400,
		limits: {
			sunAltMaxDeg: -12,
			minAltDeg: 25,
			maxAltDeg: null,
			horizon: null,
			hourAngleMaxH: null,
			decMinDeg: null,
			decMaxDeg: null,
			moonDistanceDeg: 20,
			sunDistanceDeg: 45
		},
		detectors: [
			{
				shape: 'rectangle',
				widthDeg: 0.5,
				heightDeg: 0.5,
				rotationDeg: 0,
				offsetXDeg: 0,
				offsetYDeg: 0
			}
		],
		depths: [
			{
				filter: 'R',
				refLimitMag: 21,
				refExposureS: 60,
				floorMag: 25,
				extinctionMag: 0.1,
				darkSkyMag: 21.5
			}
		],
		exposureS: 120,
		overheadS: 20,
		maxTiles: 24
	};
}

/** A circle packet as the gamma-ray monitor sends it: 3 degrees, 90 %. */
export function circlePacket(overrides: Record<string, unknown> = {}): Record<string, unknown> {
	return {
		packetId: 'TB-1',
		serial: 1,
		role: 'observation',
		kind: 'report',
		t0: '2026-12-01T03:41:27Z',
		shape: circle(83.4, -8.2, 3),
		significance: 8.1,
		falseAlarmPerYear: 0.2,
		...overrides
	};
}

export function circle(raDeg: number, decDeg: number, radiusDeg: number) {
	return { kind: 'circle', centre: { raDeg, decDeg }, radiusDeg, containment: 0.9 };
}
