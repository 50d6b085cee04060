import { randomUUID } from 'node:crypto';
import type { Actor } from '../../src/lib/server/actor';
import type { App } from '../../src/lib/server/app';
import { parseConfig } from '../../src/lib/server/config';
import { connectDatabase, type Connection } from '../../src/lib/server/db/database';
import { alert, packet, stream } from '../../src/lib/server/db/schema/alerts';
import { pushDevice, subscription } from '../../src/lib/server/db/schema/circulars';
import { telescope } from '../../src/lib/server/db/schema/network';
import { person } from '../../src/lib/server/db/schema/people';
import { region, transient } from '../../src/lib/server/db/schema/transients';
import type { Role } from '../../src/lib/domain/vocabulary';
import type { Queue } from '../../src/lib/server/jobs/queue';
import { createTestDatabase } from './testDatabase';

export const NOW = new Date('2026-12-01T04:12:40Z');
export const T0 = new Date('2026-12-01T03:41:27Z');

export type QueuedJob = { name: string; payload: unknown };

/** A database of its own with an App on it whose queue only remembers, and makers for what circulars need. */
export async function openCircularWorld(environment: Record<string, string> = {}) {
	const database = await createTestDatabase();
	const connection = connectDatabase(database.url, 24);
	const jobs: QueuedJob[] = [];
	const queue: Queue = {
		enqueue: (_tx, job, payload) => {
			jobs.push({ name: job.name, payload: job.payload.parse(payload) });
			return Promise.resolve();
		}
	};
	const app: App = {
		config: parseConfig({
			DATABASE_URL: database.url,
			ORIGIN: 'http://127.0.0.1:4180',
			AUTH_SECRET: 'x'.repeat(32),
			SMTP_URL: 'smtp://127.0.0.1:1',
			DUSKLINE_DEMO: 'on',
			...environment
		}),
		database: connection.database,
		pool: connection.pool,
		queue,
		// Circulars never compute an outlook: a call would be a mistake.
		compute: undefined as unknown as App['compute'],
		files: null,
		now: () => NOW
	};
	return {
		app,
		jobs,
		databaseUrl: database.url,
		...makers(connection),
		close: async () => {
			await connection.close();
			await database.drop();
		}
	};
}

export type CircularWorld = Awaited<ReturnType<typeof openCircularWorld>>;

function makers({ database }: Connection) {
	let count = 0;
	return {
		async person(roles: Role[], name = `Person ${++count}`): Promise<Actor> {
			const [row] = await database
				.insert(person)
				.values({
					name,
					initials: 'PX',
					email: `p${++count}@example.org`,
					organisation: 'Open Sky Group',
					roles
				})
				.returning();
			return { ...row!, roles };
		},
		async stream(code: string): Promise<string> {
			const [row] = await database
				.insert(stream)
				.values({
					code,
					name: code.charAt(0).toUpperCase() + code.slice(1),
					streamClass: 'gamma',
					fade: { m1Mean: 22.2, m1Spread: 2.3, alpha: 1 }
				})
				.returning({ id: stream.id });
			return row!.id;
		},
		async telescope(code: string, name: string): Promise<string> {
			const [row] = await database
				.insert(telescope)
				.values({
					code,
					name,
					site: 'Somewhere high',
					apertureM: 1.5,
					latDeg: -30,
					lonDeg: -70,
					heightM: 2400,
					limits: {
						sunAltMaxDeg: -12,
						minAltDeg: 30,
						maxAltDeg: null,
						horizon: null,
						hourAngleMaxH: null,
						decMinDeg: null,
						decMaxDeg: null,
						moonDistanceDeg: 30,
						sunDistanceDeg: 45
					},
					detectors: [],
					depths: [],
					exposureS: 60,
					overheadS: 10
				})
				.returning({ id: telescope.id });
			return row!.id;
		},
		async transient(
			designation: string,
			values: Partial<typeof transient.$inferInsert> = {}
		): Promise<string> {
			const [row] = await database
				.insert(transient)
				.values({ designation, t0: T0, firstReceivedAt: T0, ...values })
				.returning({ id: transient.id });
			return row!.id;
		},
		async alert(streamId: string, transientId: string, packetId: string): Promise<void> {
			const receivedAt = new Date(T0.getTime() + 22_000);
			const [raw] = await database
				.insert(packet)
				.values({
					streamId,
					contentType: 'application/json',
					body: Buffer.from('{}'),
					sha256: randomUUID(),
					receivedAt
				})
				.returning({ id: packet.id });
			await database.insert(alert).values({
				streamId,
				packetId,
				serial: 1,
				rawId: raw!.id,
				role: 'observation',
				kind: 'report',
				cites: [],
				t0: T0,
				receivedAt,
				shape: {
					kind: 'circle',
					centre: { raDeg: 83.4, decDeg: -8.2 },
					radiusDeg: 3.1,
					containment: 0.9
				},
				significance: 8.1,
				transientId,
				membership: 'started'
			});
		},
		async region(transientId: string): Promise<void> {
			await database.insert(region).values({
				transientId,
				version: 1,
				computedAt: T0,
				cause: 'first alert',
				alertCount: 2,
				method: 'closed',
				raDeg: 83.401,
				decDeg: -8.2008,
				sigmaDeg: 0.01,
				area50Deg2: 0.0004,
				area90Deg2: 0.0014,
				equivalentRadiusDeg: 0.0213,
				logOddsAgreement: Math.log(14_000),
				points: { raDeg: [83.401], decDeg: [-8.2008], probability: [1] },
				moc50: [],
				moc90: []
			});
		},
		async subscribe(
			personId: string,
			values: Partial<typeof subscription.$inferInsert> = {}
		): Promise<void> {
			await database.insert(subscription).values({ personId, ...values });
		},
		async device(
			personId: string,
			name: string,
			target: { endpoint: string; p256dh: string; auth: string }
		): Promise<void> {
			await database.insert(pushDevice).values({ personId, name, ...target });
		}
	};
}
