import { and, asc, eq, isNull } from 'drizzle-orm';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { stream } from '../db/schema/alerts';
import { DomainError, type FieldError } from '../domainError';
import { filelessPacket } from './readFilePacket';
import { receiveUpload, type Upload } from './receiveUpload';
import { requireStore } from '../storage/objectStore';
import { takeIn } from './takeInService';
import type { StreamRow } from './readOutcome';

/** Fields that are numbers in a packet; left empty, they are not given. */
const NUMBERS = ['serial', 'significance', 'falseAlarmPerYear'];
const TEXTS = ['packetId', 'role', 'remarks'];

/** Streams in service, for whom a file can be entered. */
export async function enterableStreams(
	app: App,
	actor: Actor | null
): Promise<{ code: string; name: string }[]> {
	requirePermission(actor, 'submitAlert');
	return app.database
		.select({ code: stream.code, name: stream.name })
		.from(stream)
		.where(isNull(stream.retiredAt))
		.orderBy(asc(stream.name));
}

/** What became of an entered file. */
export type EnteredFile = { designation: string; isNew: boolean };

/**
 * Takes in a file with a map or coverage map that a person sends by the form. Mistakes in the fields are told
 * to the person and nothing is kept; a file that can't be read goes to quarantine like any packet.
 */
export async function enterFile(
	app: App,
	actor: Actor | null,
	request: Request
): Promise<EnteredFile> {
	requirePermission(actor, 'submitAlert');
	const upload = await receiveUpload(app, request);
	let source: StreamRow;
	let packet: Record<string, unknown>;
	try {
		({ source, packet } = await checked(app, upload));
	} catch (error) {
		if (upload.file) await requireStore(app.files).remove(upload.file.key);
		throw error;
	}
	const intake = await takeIn(app, source, {
		body: Buffer.from(JSON.stringify(packet)),
		contentType: 'multipart/form-data',
		channel: 'form',
		personId: actor.id,
		file: upload.file
	});
	if (intake.kind === 'noted') throw new DomainError('invalid', intake.reason);
	return { designation: intake.receipt.designation, isNew: intake.isNew };
}

async function checked(
	app: App,
	{ fields, file }: Upload
): Promise<{ source: StreamRow; packet: Record<string, unknown> }> {
	const packet = packetOf(fields);
	const errors: FieldError[] = [];
	const code = fields.get('stream') ?? '';
	const [source] = await app.database
		.select()
		.from(stream)
		.where(and(eq(stream.code, code), isNull(stream.retiredAt)));
	if (!source) errors.push({ pointer: '/stream', detail: 'must be a stream in service' });
	if (!file || file.bytes === 0) errors.push({ pointer: '/file', detail: 'is needed' });
	try {
		filelessPacket(packet);
	} catch (error) {
		if (!(error instanceof DomainError)) throw error;
		errors.push(...error.errors);
	}
	if (!source || errors.length > 0) {
		throw new DomainError('invalid', 'Some fields are not valid.', errors);
	}
	return { source, packet };
}

function packetOf(fields: Map<string, string>): Record<string, unknown> {
	const packet: Record<string, unknown> = {};
	for (const name of TEXTS) {
		const text = fields.get(name)?.trim();
		if (text) packet[name] = text;
	}
	for (const name of NUMBERS) {
		const text = fields.get(name)?.trim();
		if (text) packet[name] = Number(text);
	}
	packet.kind = packet.serial === 1 ? 'report' : 'update';
	packet.t0 = instantOf(fields.get('t0')?.trim() ?? '');
	return packet;
}

/** A date and time without a zone is UTC, as the form says. */
function instantOf(text: string): string {
	const match = /^(\d{4}-\d\d-\d\d)[T ](\d\d:\d\d)(:\d\d(?:\.\d+)?)?$/.exec(text);
	return match ? `${match[1]}T${match[2]}${match[3] ?? ':00'}Z` : text;
}
