import { isDeepStrictEqual } from 'node:util';
import { and, eq, or, sql } from 'drizzle-orm';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import { alert } from '../db/schema/alerts';
import { journal, transient } from '../db/schema/transients';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { readPacket } from '../packets/packetReaders';
import { settlePacket, type PacketRow } from '../packets/packetStore';
import type { AlertContent, StreamRow } from '../packets/readOutcome';
import { nextDesignation } from '../transients/designation';
import { writeJournal } from '../transients/journalStore';
import { deriveRegion } from '../transients/regionService';
import { alertColumns, circleSky } from './alertSky';
import {
	homeAndPacketOf,
	lockTriage,
	serialsOf,
	withdrawAlerts,
	type AlertRow
} from './alertStore';
import { arrivalSummary, clockNotes } from './arrivalText';
import { fillAlertSkyJob } from './fillAlertSkyJob';
import { mapOf, normalShape } from './normalShape';
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
 * Makes an alert of what a kept body says: puts it into a transient, derives the joint region and asks for
 * the outlook, all in one transaction. A packet that is known already changes nothing.
 *
 * @throws DomainError `packetConflict` when another body has this id and serial.
 */
export async function receiveAlert(
	app: App,
	source: StreamRow,
	received: { content: AlertContent; kept: PacketRow; notes: string[]; hasNormalShape?: true }
): Promise<Reception> {
	const { content, kept } = received;
	const { receivedAt } = kept;
	const t0 = new Date(content.t0);
	const notes = [...clockNotes(t0, receivedAt), ...received.notes];
	const shape = received.hasNormalShape
		? mapOf(content.shape)
		: await normalShape(app, content.shape);
	const reception = await writeTransaction(app, async (tx, change) => {
		await lockTriage(tx);
		const serials = await serialsOf(tx, source.id, content.packetId);
		const twin = serials.find((row) => row.serial === content.serial);
		if (twin) return repeated(app, tx, source, twin, received);

		const placement = await placeAlert(app, tx, {
			packet: content,
			serials,
			streamId: source.id,
			streamCode: source.code,
			alertsPerYear: source.alertsPerYear,
			coincidenceWindowS: source.coincidenceWindowS,
			t0,
			shape
		});
		const home = await homeOf(tx, placement, content, t0, receivedAt);
		const moc90 = circleSky(shape);
		const [row] = await tx
			.insert(alert)
			.values({
				streamId: source.id,
				packetId: content.packetId,
				serial: content.serial,
				rawId: kept.id,
				role: content.role,
				kind: content.kind,
				cites: content.cites,
				t0,
				receivedAt,
				shape,
				moc90,
				significance: content.significance ?? null,
				falseAlarmPerYear: content.falseAlarmPerYear ?? null,
				remarks: content.remarks,
				transientId: home.id,
				membership: placement.membership,
				logOdds: placement.logOdds,
				live: placement.live
			})
			.returning(alertColumns);
		if (shape && !moc90) await app.queue.enqueue(tx, fillAlertSkyJob, {});
		await withdrawAlerts(
			tx,
			placement.withdrawn.map((item) => item.id)
		);
		await settlePacket(tx, kept.id, { state: 'taken', at: app.now() });
		await writeJournal(tx, {
			transientId: home.id,
			kind: content.kind === 'retraction' ? 'alertRetracted' : 'alertReceived',
			at: app.now(),
			actorId: kept.personId,
			summary: [arrivalSummary(source.name, content, placement), ...notes].join('; '),
			detail: {
				alertId: row!.id,
				stream: source.code,
				t0: content.t0,
				logOdds: placement.logOdds,
				notes
			}
		});
		if (placement.live) await askAgainIfDropped(tx, home.id, receivedAt);
		const touched = new Set([home.id, ...placement.withdrawn.map((item) => item.transientId)]);
		for (const id of touched) {
			await deriveRegion(
				app,
				tx,
				change,
				id,
				`${source.name} ${content.packetId}, serial ${content.serial}`
			);
		}
		return { receipt: receiptOf(row!, source.code, home.designation), isNew: true };
	});
	if ('conflict' in reception) throw reception.conflict;
	return reception;
}

/** A packet that is here already: the same again changes nothing, other content is refused. */
async function repeated(
	app: App,
	tx: Transaction,
	source: StreamRow,
	twin: AlertRow,
	{ content, kept }: { content: AlertContent; kept: PacketRow }
): Promise<Reception | { conflict: DomainError }> {
	const { designation, packet: first } = await homeAndPacketOf(tx, twin);
	const name = `${source.name} ${content.packetId}, serial ${content.serial}`;
	if (first.sha256 === kept.sha256 || (await sameContent(app, source, first, content))) {
		if (first.id !== kept.id) await settlePacket(tx, kept.id, { state: 'copy', at: app.now() });
		await noteRepetition(tx, twin, app.now(), `${name}: came again, nothing changed`, 'copy');
		return { receipt: receiptOf(twin, source.code, designation), isNew: false };
	}
	await noteRepetition(
		tx,
		twin,
		app.now(),
		`${name}: came again with other content; the first one stands, the other is in quarantine`,
		'conflict'
	);
	return {
		conflict: new DomainError(
			'packetConflict',
			`Packet ${content.packetId}, serial ${content.serial}, is known with other content. Send a higher serial to change it.`
		)
	};
}

/** Once for each alert and kind: a sender that repeats itself for hours must not fill the journal. */
async function noteRepetition(
	tx: Transaction,
	{ id, transientId }: AlertRow,
	at: Date,
	summary: string,
	what: 'copy' | 'conflict'
): Promise<void> {
	const known = await tx.$count(
		journal,
		and(
			eq(journal.transientId, transientId),
			eq(journal.kind, 'alertRepeated'),
			sql`${journal.detail} @> ${JSON.stringify({ alertId: id, what })}::jsonb`
		)
	);
	if (known > 0) return;
	const detail = { alertId: id, what };
	await writeJournal(tx, {
		transientId,
		kind: 'alertRepeated',
		at,
		actorId: null,
		summary,
		detail
	});
}

/** The same packet may be written with other spacing or key order. */
async function sameContent(
	app: App,
	source: StreamRow,
	first: PacketRow,
	content: AlertContent
): Promise<boolean> {
	try {
		const outcome = await readPacket(app, source, first);
		return outcome.kind === 'alert' && isDeepStrictEqual(outcome.content, content);
	} catch (error) {
		// Settings may have changed since: what can't be read now is not known to be the same.
		if (error instanceof DomainError) return false;
		throw error;
	}
}

async function homeOf(
	tx: Transaction,
	placement: Placement,
	packet: AlertContent,
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
