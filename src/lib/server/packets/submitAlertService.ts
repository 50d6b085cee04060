import { and, asc, desc, eq, isNull } from 'drizzle-orm';
import { readHandAlert, type HandAlertFields, type HandAlertStream } from '../../domain/handAlert';
import { requirePermission, type Actor } from '../actor';
import { clockNotes } from '../alerts/arrivalText';
import type { App } from '../app';
import { alert, stream } from '../db/schema/alerts';
import { DomainError } from '../domainError';
import { takeIn } from './takeInService';

const PACKETS_OFFERED = 30;

/** The streams in service that an alert can be entered for, with the names of their latest packets. */
export async function handAlertStreams(app: App, actor: Actor | null): Promise<HandAlertStream[]> {
	requirePermission(actor, 'submitAlert');
	const rows = await app.database
		.select()
		.from(stream)
		.where(isNull(stream.retiredAt))
		.orderBy(asc(stream.name));
	return Promise.all(
		rows.map(async ({ id, code, name, streamClass, defaultContainment }) => {
			const latest = await app.database
				.select({ packetId: alert.packetId })
				.from(alert)
				.where(eq(alert.streamId, id))
				.orderBy(desc(alert.receivedAt))
				.limit(PACKETS_OFFERED);
			return {
				code,
				name,
				streamClass,
				defaultContainment: Number((defaultContainment * 100).toPrecision(4)),
				packetIds: [...new Set(latest.map(({ packetId }) => packetId))]
			};
		})
	);
}

/**
 * Takes in an alert that came by phone or mail, as a packet of its stream that is kept like every other.
 * The same form sent twice is one alert.
 *
 * @throws DomainError `invalid` with the form's fields; nothing is kept then.
 */
export async function submitAlert(
	app: App,
	actor: Actor | null,
	fields: HandAlertFields
): Promise<{ designation: string; isNew: boolean }> {
	requirePermission(actor, 'submitAlert');
	const [source] = await app.database
		.select()
		.from(stream)
		.where(and(eq(stream.code, fields.stream), isNull(stream.retiredAt)));
	if (!source) throw invalid('/stream', 'Choose a stream.');
	const { packet, errors } = readHandAlert(fields);
	if (!packet) throw new DomainError('invalid', 'Some fields are not valid.', errors);
	const [cited] = packet.cites ?? [];
	const needed = cited?.packetId ?? (packet.kind === 'report' ? null : packet.packetId);
	if (needed !== null) {
		const known = await app.database.$count(
			alert,
			and(eq(alert.streamId, source.id), eq(alert.packetId, needed))
		);
		if (known === 0) throw invalid('/earlier', `${source.name} has no packet ${needed} here.`);
	}
	clockNotes(new Date(packet.t0), app.now());
	try {
		const intake = await takeIn(app, source, {
			body: Buffer.from(JSON.stringify(packet, null, '\t')),
			contentType: 'application/json',
			channel: 'form',
			personId: actor.id
		});
		if (intake.kind === 'noted') throw new Error(`noted only: ${intake.reason}`);
		return { designation: intake.receipt.designation, isNew: intake.isNew };
	} catch (error) {
		if (error instanceof DomainError && error.code === 'packetConflict') {
			throw new DomainError('packetConflict', 'This packet is here with other content.', [
				{
					pointer: '/packetId',
					detail: `${source.name} ${packet.packetId} is here with other content. Enter this as an update of it.`
				}
			]);
		}
		throw error;
	}
}

function invalid(pointer: string, detail: string): DomainError {
	return new DomainError('invalid', 'Some fields are not valid.', [{ pointer, detail }]);
}
