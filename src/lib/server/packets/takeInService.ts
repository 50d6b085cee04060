import { eq } from 'drizzle-orm';
import { receiveAlert, type Reception } from '../alerts/alertService';
import type { App } from '../app';
import { person } from '../db/schema/people';
import { DomainError } from '../domainError';
import { noteHeard } from '../streams/heardStream';
import { readPacket } from './packetReaders';
import {
	keepPacket,
	refusalText,
	settlePacket,
	type PacketRow,
	type ReceivedPacket
} from './packetStore';
import type { StreamRow } from './readOutcome';

/** What became of a body: an alert, the one it is a copy of, or a packet that is kept but is no alert. */
export type Intake = ({ kind: 'alert' } & Reception) | { kind: 'noted'; reason: string };

/**
 * Takes in one body of a stream: keeps it as received, then reads and judges it. What can't be read goes to
 * the quarantine list with the reason and is thrown on. The caller has authenticated the sender.
 *
 * @throws DomainError with what is wrong, naming the field or byte.
 */
export async function takeIn(
	app: App,
	source: StreamRow,
	received: ReceivedPacket
): Promise<Intake> {
	const kept = await keepPacket(app.database, source.id, received, app.now());
	return judgePacket(app, source, kept);
}

/** Keeps what could not be received whole, with the reason, for the quarantine list. */
export async function keepRefused(
	app: App,
	source: StreamRow,
	received: ReceivedPacket,
	refusal: DomainError
): Promise<void> {
	const kept = await keepPacket(app.database, source.id, received, app.now());
	await refuse(app, kept, refusal);
}

/** Reads and judges a body that is kept; the same on arrival, on replay and after a process died over it. */
export async function judgePacket(
	app: App,
	source: StreamRow,
	kept: PacketRow,
	replayedBy: string | null = null
): Promise<Intake> {
	try {
		const outcome = await readPacket(app, source, kept);
		// What people hand in does not say that the stream's own way works.
		if (!kept.personId) await noteHeard(app.database, source.id, kept.receivedAt);
		if (outcome.kind === 'noted') {
			await settlePacket(app.database, kept.id, {
				state: 'noted',
				at: app.now(),
				detail: outcome.reason
			});
			return outcome;
		}
		const notes = [...outcome.notes, ...(await handedInNotes(app, kept))];
		if (replayedBy) notes.push(`replayed from quarantine by ${replayedBy}`);
		return { kind: 'alert', ...(await receiveAlert(app, source, { ...outcome, kept, notes })) };
	} catch (error) {
		if (error instanceof DomainError) await refuse(app, kept, error);
		throw error;
	}
}

/** Who entered it, where it did not come over the stream's own way. */
async function handedInNotes(app: App, { personId, channel }: PacketRow): Promise<string[]> {
	if (!personId) return [];
	const [by] = await app.database
		.select({ name: person.name })
		.from(person)
		.where(eq(person.id, personId));
	return [`${channel === 'form' ? 'entered by hand' : 'handed in'} by ${by!.name}`];
}

async function refuse(app: App, kept: PacketRow, error: DomainError): Promise<void> {
	await settlePacket(app.database, kept.id, {
		state: 'refused',
		at: app.now(),
		code: error.code,
		detail: refusalText(error)
	});
}
