import { sql } from 'drizzle-orm';
import {
	bigint,
	bigserial,
	boolean,
	check,
	date,
	doublePrecision,
	index,
	integer,
	jsonb,
	pgTable,
	primaryKey,
	text,
	unique,
	uuid
} from 'drizzle-orm/pg-core';
import type { Decision, JournalKind, TransientState } from '../../../domain/vocabulary';
import type { JointRegion, RegionPoints } from '../../../sky/regions/jointRegion';
import type { Outlook } from '../../../sky/outlook/outlook';
import { instant, skyRegion } from '../columns';
import { person } from './people';

/** The thing in the sky that one or more alerts belong to. */
export const transient = pgTable(
	'transient',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		designation: text('designation').notNull().unique(),
		/** Earliest T0 of its live alerts. */
		t0: instant('t0').notNull(),
		firstReceivedAt: instant('first_received_at').notNull(),
		state: text('state').$type<TransientState>().notNull().default('open'),
		/** All its alerts have the role `test`: shown as such, never counted, never sent to partners. */
		isTest: boolean('is_test').notNull().default(false),
		isDrill: boolean('is_drill').notNull().default(false),
		takenBy: uuid('taken_by').references(() => person.id),
		takenAt: instant('taken_at'),
		decision: text('decision').$type<Decision>(),
		decidedBy: uuid('decided_by').references(() => person.id),
		decidedAt: instant('decided_at'),
		decisionReason: text('decision_reason').notNull().default(''),
		/** Version of the joint region in force; 0 before the first. */
		regionVersion: integer('region_version').notNull().default(0),
		/** Board revision at which anything about it last changed. */
		revision: bigint('revision', { mode: 'number' }).notNull().default(0)
	},
	(table) => [
		index('transient_state').on(table.state),
		index('transient_t0').on(table.t0),
		check('transient_taken_whole', sql`(${table.takenBy} is null) = (${table.takenAt} is null)`),
		check(
			'transient_decided_whole',
			sql`(${table.decision} is null) = (${table.decidedAt} is null)`
		)
	]
);

/** The last letter number given on each day of T0. */
export const designationCounter = pgTable('designation_counter', {
	day: date('day', { mode: 'string' }).primaryKey(),
	last: integer('last').notNull()
});

/** One version of a transient's joint region. */
export const region = pgTable(
	'region',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		transientId: uuid('transient_id')
			.notNull()
			.references(() => transient.id, { onDelete: 'cascade' }),
		version: integer('version').notNull(),
		computedAt: instant('computed_at').notNull(),
		/** What made it necessary, in words for the journal. */
		cause: text('cause').notNull(),
		/** Number of live alerts it was made from. */
		alertCount: integer('alert_count').notNull(),
		method: text('method').$type<JointRegion['method']>().notNull(),
		raDeg: doublePrecision('ra_deg').notNull(),
		decDeg: doublePrecision('dec_deg').notNull(),
		sigmaDeg: doublePrecision('sigma_deg'),
		area50Deg2: doublePrecision('area50_deg2').notNull(),
		area90Deg2: doublePrecision('area90_deg2').notNull(),
		equivalentRadiusDeg: doublePrecision('equivalent_radius_deg').notNull(),
		/** Natural log of the odds that all live alerts come from one source; null with fewer than two. */
		logOddsAgreement: doublePrecision('log_odds_agreement'),
		/** Number of reports of nothing that it takes into account. */
		notFoundCount: integer('not_found_count').notNull().default(0),
		/** Chance that the source is where somebody looked but fainter than every limit there; null when nobody did. */
		tooFaintChance: doublePrecision('too_faint_chance'),
		points: jsonb('points').$type<RegionPoints>().notNull(),
		moc50: skyRegion('moc50').notNull(),
		moc90: skyRegion('moc90').notNull()
	},
	(table) => [
		unique('region_transient_version').on(table.transientId, table.version),
		index('region_moc90').using('gist', sql`${table.moc90} multirange_ops`)
	]
);

/** The ranked telescopes for one version of a region, as computed at one instant. */
export const outlook = pgTable('outlook', {
	transientId: uuid('transient_id')
		.primaryKey()
		.references(() => transient.id, { onDelete: 'cascade' }),
	regionVersion: integer('region_version').notNull(),
	computedAt: instant('computed_at').notNull(),
	networkCatch: doublePrecision('network_catch').notNull(),
	costOfWaitingPoints: doublePrecision('cost_of_waiting_points').notNull(),
	body: jsonb('body').$type<Outlook>().notNull()
});

/** Everything that happened to a transient, append-only; response times are computed from it. */
export const journal = pgTable(
	'journal',
	{
		id: bigserial('id', { mode: 'number' }).primaryKey(),
		transientId: uuid('transient_id')
			.notNull()
			.references(() => transient.id),
		at: instant('at').notNull().defaultNow(),
		kind: text('kind').$type<JournalKind>().notNull(),
		actorId: uuid('actor_id').references(() => person.id),
		/** One plain sentence. */
		summary: text('summary').notNull(),
		detail: jsonb('detail').$type<Record<string, unknown>>().notNull().default({})
	},
	(table) => [index('journal_transient').on(table.transientId, table.id)]
);

/** One row: the number of the last change to anything the board shows. Its lock orders the changes. */
export const boardRevision = pgTable(
	'board_revision',
	{
		only: boolean('only').notNull().default(true),
		value: bigint('value', { mode: 'number' }).notNull(),
		/** The value at which something all transients share changed last: telescopes, streams, people, the rota. */
		network: bigint('network', { mode: 'number' }).notNull().default(0)
	},
	(table) => [
		primaryKey({ columns: [table.only] }),
		check('board_revision_one', sql`${table.only}`)
	]
);
