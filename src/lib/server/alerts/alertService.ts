import { createHash } from 'node:crypto';
import { isDeepStrictEqual } from 'node:util';
import { and, eq, or } from 'drizzle-orm';
import { alertPacketSchema, type AlertPacket } from '../../domain/alertPacket';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import { alert, packet as packetTable, stream } from '../db/schema/alerts';
import { transient } from '../db/schema/transients';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { nextDesignation } from '../transients/designation';
import { writeJournal } from '../transients/journalStore';
import { deriveRegion } from '../transients/regionService';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { findPacket, lockTriage, withdrawAlerts, type AlertRow } from './alertStore';
import { circleSky } from './alertSky';
import { fillAlertSkyJob } from './fillAlertSkyJob';
import { normalShape } from './normalShape';
import { placeAlert, type Placement } from './association';

/** What the sender is told: the same for the first packet and for every copy of it. */
export type Receipt = {
	alertId: string;
	stream: string;
	packetId: string;
	serial: number;
	designation: string;
	receivedAt: string;
};

export type Reception = { receipt: Receipt; isNew: boolean };

/**
 * Takes in one packet of a stream: keeps the body, puts the alert into a transient, derives the joint
 * region and asks for the outlook, all in one transaction. The caller has authenticated the key.
 *
 * @throws DomainError `packetConflict` when another body has this id and serial.
 */
export async function receiveAlert(
	app: App,
	source: AuthenticatedStream,
	received: { packet: AlertPacket; body: Buffer; contentType: string }
): Promise<Reception> {
	const { packet, body } = received;
	const known = await findPacket(app.database, source.streamId, packet.packetId, packet.serial);
	if (known) return sameOrConflict(known, received, source);
	const shape = await normalShape(app, packet.shape);
	return writeTransaction(app, async (tx, change) => {
		await lockTriage(tx);
		// A copy may have come in while this one waited for the lock.
		const twin = await findPacket(tx, source.streamId, packet.packetId, packet.serial);
		if (twin) return sameOrConflict(twin, received, source);

		const receivedAt = app.now();
		const t0 = new Date(packet.t0);
		const settings = await streamSettings(tx, source.streamId);
		const placement = await placeAlert(tx, {
			packet,
			streamId: source.streamId,
			streamCode: settings.code,
			alertsPerYear: settings.alertsPerYear,
			coincidenceWindowS: settings.coincidenceWindowS,
			t0,
			shape
		});
		const [raw] = await tx
			.insert(packetTable)
			.values({
				streamId: source.streamId,
				contentType: received.contentType,
				body,
				sha256: sha256Of(body),
				receivedAt
			})
			.returning({ id: packetTable.id });
		const home = await homeOf(tx, placement, packet, t0, receivedAt);
		const [row] = await tx
			.insert(alert)
			.values({
				streamId: source.streamId,
				packetId: packet.packetId,
				serial: packet.serial,
				rawId: raw!.id,
				role: packet.role,
				kind: packet.kind,
				cites: packet.cites,
				t0,
				receivedAt,
				shape,
				moc90: circleSky(shape),
				significance: packet.significance ?? null,
				falseAlarmPerYear: packet.falseAlarmPerYear ?? null,
				remarks: packet.remarks,
				transientId: home.id,
				membership: placement.membership,
				logOdds: placement.logOdds,
				live: placement.live
			})
			.returning();
		if (shape && !row!.moc90) await app.queue.enqueue(tx, fillAlertSkyJob, {});
		await withdrawAlerts(
			tx,
			placement.withdrawn.map((item) => item.id)
		);
		await tx.update(stream).set({ lastHeardAt: receivedAt }).where(eq(stream.id, source.streamId));
		await writeJournal(tx, {
			transientId: home.id,
			kind: packet.kind === 'retraction' ? 'alertRetracted' : 'alertReceived',
			at: receivedAt,
			actorId: null,
			summary: arrivalSummary(settings.name, packet, placement),
			detail: { alertId: row!.id, stream: settings.code, t0: packet.t0, logOdds: placement.logOdds }
		});
		if (placement.live) await askAgainIfDropped(tx, home.id, receivedAt);
		const touched = new Set([home.id, ...placement.withdrawn.map((item) => item.transientId)]);
		for (const id of touched) {
			await deriveRegion(
				app,
				tx,
				change,
				id,
				`${settings.name} ${packet.packetId}, serial ${packet.serial}`
			);
		}
		return { receipt: receiptOf(row!, settings.code, home.designation), isNew: true };
	});
}

function sameOrConflict(
	known: { alert: AlertRow; designation: string; body: Buffer; sha256: string },
	received: { packet: AlertPacket; body: Buffer },
	source: AuthenticatedStream
): Reception {
	if (known.sha256 !== sha256Of(received.body) && !sameContent(known.body, received.packet)) {
		throw new DomainError(
			'packetConflict',
			`Packet ${received.packet.packetId}, serial ${received.packet.serial}, is known with other content. Send a higher serial to change it.`
		);
	}
	return {
		receipt: receiptOf(known.alert, source.stream.code, known.designation),
		isNew: false
	};
}

/** The same packet may be written with other spacing or key order. */
function sameContent(body: Buffer, packet: AlertPacket): boolean {
	try {
		return isDeepStrictEqual(alertPacketSchema.parse(JSON.parse(body.toString('utf8'))), packet);
	} catch {
		return false;
	}
}

async function streamSettings(tx: Transaction, id: string) {
	const [settings] = await tx.select().from(stream).where(eq(stream.id, id));
	if (!settings) throw new DomainError('notFound', 'This stream is not known.');
	return settings;
}

async function homeOf(
	tx: Transaction,
	placement: Placement,
	packet: AlertPacket,
	t0: Date,
	receivedAt: Date
): Promise<{ id: string; designation: string }> {
	if (placement.transientId) {
		const [home] = await tx
			.select({ id: transient.id, designation: transient.designation })
			.from(transient)
			.where(eq(transient.id, placement.transientId));
		return home!;
	}
	const [home] = await tx
		.insert(transient)
		.values({
			designation: await nextDesignation(tx, t0),
			t0,
			firstReceivedAt: receivedAt,
			isTest: packet.role === 'test'
		})
		.returning({ id: transient.id, designation: transient.designation });
	return home!;
}

/**
 * A transient that was dropped or closed and hears a new live alert needs somebody to take it again:
 * what was not worth it with a wide circle may be worth it with a position.
 */
async function askAgainIfDropped(tx: Transaction, transientId: string, at: Date): Promise<void> {
	const reopened = await tx
		.update(transient)
		.set({
			takenBy: null,
			takenAt: null,
			decision: null,
			decidedBy: null,
			decidedAt: null,
			decisionReason: ''
		})
		.where(
			and(
				eq(transient.id, transientId),
				or(eq(transient.state, 'closed'), eq(transient.decision, 'drop'))
			)
		)
		.returning({ id: transient.id });
	if (reopened.length === 0) return;
	await writeJournal(tx, {
		transientId,
		kind: 'reopened',
		at,
		actorId: null,
		summary: 'A new alert reopened it: somebody has to take it again'
	});
}

function arrivalSummary(streamName: string, packet: AlertPacket, placement: Placement): string {
	const what = `${streamName} ${packet.packetId}, serial ${packet.serial}`;
	if (packet.kind === 'retraction') return `${what}: retraction`;
	const odds =
		placement.logOdds === null ? '' : ` at odds of ${formatOdds(placement.logOdds)} for one source`;
	const ways: Record<Placement['membership'], string> = {
		started: 'started this transient',
		joined: `joined${odds}`,
		provisional: `joined provisionally${odds}; somebody should look`,
		cited: 'belongs to a packet that is here',
		moved: 'was moved here'
	};
	return `${what}: ${ways[placement.membership]}${placement.live ? '' : '; already replaced'}`;
}

function formatOdds(logOdds: number): string {
	if (logOdds >= 0)
		return logOdds > 13.8
			? 'over 1,000,000 : 1'
			: `${Number(Math.exp(logOdds).toPrecision(2))} : 1`;
	return `1 : ${Number(Math.exp(-logOdds).toPrecision(2))}`;
}

function receiptOf(row: AlertRow, streamCode: string, designation: string): Receipt {
	return {
		alertId: row.id,
		stream: streamCode,
		packetId: row.packetId,
		serial: row.serial,
		designation,
		receivedAt: row.receivedAt.toISOString()
	};
}

function sha256Of(body: Buffer): string {
	return createHash('sha256').update(body).digest('hex');
}
