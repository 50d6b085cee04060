import { sql } from 'drizzle-orm';
import {
	bigint,
	bigserial,
	boolean,
	doublePrecision,
	index,
	integer,
	jsonb,
	pgTable,
	text,
	unique,
	uuid
} from 'drizzle-orm/pg-core';
import type {
	AlertKind,
	AlertRole,
	CitationRelation,
	Membership,
	PacketChannel,
	PacketState,
	StreamClass
} from '../../../domain/vocabulary';
import type { ParamMap } from '../../../domain/stream';
import type { Shape } from '../../../sky/regions/shape';
import type { FadeModel } from '../../../sky/outlook/outlook';
import { bytes, instant, skyRegion } from '../columns';
import { person } from './people';
import { transient } from './transients';

/** An outside source of alerts. */
export const stream = pgTable('stream', {
	id: uuid('id').primaryKey().defaultRandom(),
	/** Lower-case, in addresses and citations. */
	code: text('code').notNull().unique(),
	name: text('name').notNull(),
	streamClass: text('stream_class').$type<StreamClass>().notNull(),
	/** Containment of the radius when a packet states none, 0 to 1. */
	defaultContainment: doublePrecision('default_containment').notNull().default(0.9),
	/** Added in quadrature when a packet states none, degrees, one sigma per axis. */
	defaultSystematicDeg: doublePrecision('default_systematic_deg').notNull().default(0),
	/** Real alerts expected a year; sets the prior odds of association. */
	alertsPerYear: doublePrecision('alerts_per_year').notNull().default(100),
	/** Alerts further apart in T0 than this are never put together by position alone. */
	coincidenceWindowS: doublePrecision('coincidence_window_s').notNull().default(3600),
	fade: jsonb('fade').$type<FadeModel>().notNull(),
	silentAfterMinutes: integer('silent_after_minutes').notNull().default(1440),
	/** Which named Params of a VOEvent hold what. */
	paramMap: jsonb('param_map').$type<ParamMap>().notNull().default({}),
	lastHeardAt: instant('last_heard_at'),
	/** When stewards were told that it is silent; null while it is heard. */
	silenceNotedAt: instant('silence_noted_at'),
	retiredAt: instant('retired_at'),
	createdAt: instant('created_at').notNull().defaultNow()
});

/** A stream's API key; only its SHA-256 is kept. */
export const streamKey = pgTable('stream_key', {
	id: uuid('id').primaryKey().defaultRandom(),
	streamId: uuid('stream_id')
		.notNull()
		.references(() => stream.id, { onDelete: 'cascade' }),
	label: text('label').notNull(),
	/** The first characters, to recognise it by. */
	prefix: text('prefix').notNull(),
	hash: text('hash').notNull().unique(),
	createdBy: uuid('created_by').references(() => person.id),
	createdAt: instant('created_at').notNull().defaultNow(),
	lastUsedAt: instant('last_used_at'),
	revokedAt: instant('revoked_at')
});

/** A body as received, kept before it is judged and whatever is made of it. */
export const packet = pgTable(
	'packet',
	{
		id: bigserial('id', { mode: 'number' }).primaryKey(),
		streamId: uuid('stream_id')
			.notNull()
			.references(() => stream.id),
		/** The key it came with; null for a form or a socket. */
		keyId: uuid('key_id').references(() => streamKey.id, { onDelete: 'set null' }),
		/** Who sent it by a form. */
		personId: uuid('person_id').references(() => person.id),
		channel: text('channel').$type<PacketChannel>().notNull().default('api'),
		contentType: text('content_type').notNull(),
		body: bytes('body').notNull(),
		/** The file that came with it, in object storage. */
		fileKey: text('file_key'),
		fileName: text('file_name'),
		fileBytes: bigint('file_bytes', { mode: 'number' }),
		sha256: text('sha256').notNull(),
		receivedAt: instant('received_at').notNull(),
		state: text('state').$type<PacketState>().notNull().default('received'),
		judgedAt: instant('judged_at'),
		/** Why it was refused: the problem's code, as in the answer to the sender. */
		code: text('code'),
		/** The reason in words; of a noted packet, why it is no alert. */
		detail: text('detail').notNull().default('')
	},
	(table) => [
		index('packet_stream_received').on(table.streamId, table.receivedAt),
		index('packet_unsettled')
			.on(table.state, table.receivedAt)
			.where(sql`${table.state} in ('received', 'refused')`)
	]
);

/** A server that sends a stream's packets by the VOEvent Transport Protocol, and how its connection fares. */
export const streamBroker = pgTable(
	'stream_broker',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		streamId: uuid('stream_id')
			.notNull()
			.references(() => stream.id, { onDelete: 'cascade' }),
		host: text('host').notNull(),
		port: integer('port').notNull(),
		/** Only packets whose IVORN starts with it are this stream's; empty: all. */
		ivornPrefix: text('ivorn_prefix').notNull().default(''),
		enabled: boolean('enabled').notNull().default(true),
		/** Since when the connection stands; null while there is none. */
		connectedAt: instant('connected_at'),
		/** The last message of any kind. */
		lastAliveAt: instant('last_alive_at'),
		lastError: text('last_error'),
		lastErrorAt: instant('last_error_at')
	},
	(table) => [unique('stream_broker_address').on(table.streamId, table.host, table.port)]
);

export type { ParamMap };

/** An earlier packet; without `stream` (an IVORN does not say which) it may be any stream's. */
export type Citation = { stream: string | null; packetId: string; relation: CitationRelation };

/** One machine message from a stream. */
export const alert = pgTable(
	'alert',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		streamId: uuid('stream_id')
			.notNull()
			.references(() => stream.id),
		packetId: text('packet_id').notNull(),
		serial: integer('serial').notNull(),
		rawId: bigint('raw_id', { mode: 'number' })
			.notNull()
			.references(() => packet.id),
		role: text('role').$type<AlertRole>().notNull(),
		kind: text('kind').$type<AlertKind>().notNull(),
		cites: jsonb('cites').$type<Citation[]>().notNull(),
		t0: instant('t0').notNull(),
		receivedAt: instant('received_at').notNull(),
		/** Null for a retraction. */
		shape: jsonb('shape').$type<Shape>(),
		/** The shape's own 90 % area, a little larger, for searches; null until a job has worked it out (circles have it at once). */
		moc90: skyRegion('moc90'),
		significance: doublePrecision('significance'),
		falseAlarmPerYear: doublePrecision('false_alarm_per_year'),
		remarks: text('remarks').notNull().default(''),
		transientId: uuid('transient_id')
			.notNull()
			.references(() => transient.id),
		membership: text('membership').$type<Membership>().notNull(),
		/** Natural log of the posterior odds that it belongs; null when it started the transient or cites. */
		logOdds: doublePrecision('log_odds'),
		/** False once superseded by a later serial or packet, or retracted. */
		live: boolean('live').notNull().default(true)
	},
	(table) => [
		unique('alert_stream_packet_serial').on(table.streamId, table.packetId, table.serial),
		index('alert_transient').on(table.transientId),
		index('alert_t0').on(table.t0),
		index('alert_cites').using('gin', sql`${table.cites} jsonb_path_ops`),
		index('alert_moc90').using('gist', sql`${table.moc90} multirange_ops`)
	]
);
