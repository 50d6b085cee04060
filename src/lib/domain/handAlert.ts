import { z } from 'zod';
import { alertPacketSchema } from './alertPacket';
import {
	ANGLE_UNITS,
	HAND_SHAPES,
	readHandShape,
	type FormError,
	type HandShape
} from './handShape';
import { plainIssue } from './plainIssue';
import { isoFromUtcText } from './utcText';
import { ALERT_KINDS, type StreamClass } from './vocabulary';

const text = z.string().default('');

/** What the form for alerts that came by phone or mail sends: text as typed, read by `readHandAlert`. */
export const handAlertSchema = z.object({
	/** Made with the page: a form sent twice is one alert. */
	submission: z.uuid('Open the form again.'),
	stream: z.string().min(1, 'Choose a stream.'),
	kind: z.enum(ALERT_KINDS).default('report'),
	/** The stream's packet that an update or retraction speaks of. */
	earlier: text,
	packetId: text,
	serial: text,
	t0: text,
	isTest: z.literal('on').optional(),
	shape: z.enum(HAND_SHAPES).default('circle'),
	position: text,
	radius: text,
	radiusUnit: z.enum(ANGLE_UNITS).default('deg'),
	semiMinor: text,
	positionAngle: text,
	halfWidth: text,
	containment: text,
	// A browser sends line ends as CR LF.
	vertices: text.transform((value) => value.replaceAll('\r\n', '\n')),
	remarks: text
});
export type HandAlertFields = z.output<typeof handAlertSchema>;

/** A stream that alerts can be entered for, with the names of its latest packets. */
export type HandAlertStream = {
	code: string;
	name: string;
	streamClass: StreamClass;
	/** Percent, when a message does not say. */
	defaultContainment: number;
	packetIds: string[];
};

/** Name of a packet that came without one; the same for every try of one form. */
export const handPacketId = (submission: string) => `by-hand-${submission.slice(0, 13)}`;

/** Where the form shows what the packet's schema finds wrong. */
const FIELD_OF: Record<string, string> = { cites: 'earlier', role: 'isTest' };

export type HandAlert = {
	/** Body in the product's own JSON; null while something is wrong. */
	packet: z.input<typeof alertPacketSchema> | null;
	errors: FormError[];
	folded: HandShape['folded'];
};

/** Makes a packet of a form; each thing that is wrong is said at its field. */
export function readHandAlert(fields: HandAlertFields): HandAlert {
	const retraction = fields.kind === 'retraction';
	const read = retraction ? null : readHandShape(fields);
	const errors = [...(read?.errors ?? [])];
	const fail = (field: string, detail: string) =>
		void errors.push({ pointer: `/${field}`, detail });

	const t0 = isoFromUtcText(fields.t0);
	if (t0 === null) {
		fail(
			't0',
			fields.t0.trim() === ''
				? 'A time is needed.'
				: 'Not read as a time: write it as 2026-12-01 03:41:27, UTC.'
		);
	}
	const packetId = fields.packetId.trim() || handPacketId(fields.submission);
	const earlier = fields.kind === 'report' ? '' : fields.earlier.trim();
	if (fields.kind !== 'report' && earlier === '') {
		fail('earlier', `Name the packet that this ${retraction ? 'retracts' : 'updates'}.`);
	}
	const serial = fields.serial.trim() === '' ? 1 : Number(fields.serial);
	if (earlier === packetId && serial === 1) {
		fail('serial', 'A packet of the same name needs a higher number.');
	}
	const relation = retraction ? ('retraction' as const) : ('supersedes' as const);
	const packet: z.input<typeof alertPacketSchema> = {
		packetId,
		serial,
		role: fields.isTest ? 'test' : 'observation',
		kind: fields.kind,
		cites:
			earlier && earlier !== packetId
				? [{ stream: fields.stream, packetId: earlier, relation }]
				: [],
		t0: t0 ?? '',
		...(read?.shape ? { shape: read.shape } : {}),
		remarks: fields.remarks.trim()
	};
	const known = new Set(errors.map(({ pointer }) => pointer));
	for (const issue of alertPacketSchema.safeParse(packet, { error: plainIssue }).error?.issues ??
		[]) {
		const [first = ''] = issue.path;
		const field = FIELD_OF[String(first)] ?? String(first);
		// The shape's own fields have spoken already.
		if (known.has(`/${field}`) || (field === 'shape' && read?.shape === null)) continue;
		fail(field, `${issue.message[0]!.toUpperCase()}${issue.message.slice(1)}.`);
	}
	return { packet: errors.length === 0 ? packet : null, errors, folded: read?.folded ?? [] };
}
