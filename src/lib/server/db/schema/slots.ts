import { sql } from 'drizzle-orm';
import {
	check,
	doublePrecision,
	index,
	integer,
	jsonb,
	pgTable,
	text,
	uuid
} from 'drizzle-orm/pg-core';
import type { ReportKind, SlotState } from '../../../domain/vocabulary';
import type { PlannedTile } from '../../../sky/outlook/outlook';
import { instant, timeRange } from '../columns';
import { telescope } from './network';
import { person } from './people';
import { transient } from './transients';

/** A piece of work: one telescope, one time range, one transient. Overlapping claims are excluded by a constraint. */
export const slot = pgTable(
	'slot',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		transientId: uuid('transient_id')
			.notNull()
			.references(() => transient.id),
		telescopeId: uuid('telescope_id')
			.notNull()
			.references(() => telescope.id),
		during: timeRange('during').notNull(),
		state: text('state').$type<SlotState>().notNull(),
		tiles: jsonb('tiles').$type<PlannedTile[]>().notNull(),
		filter: text('filter').notNull(),
		exposureS: doublePrecision('exposure_s').notNull(),
		/** Catch of the telescope when the slot was offered or claimed. */
		catch: doublePrecision('catch').notNull(),
		regionVersion: integer('region_version').notNull(),
		claimedBy: uuid('claimed_by').references(() => person.id),
		claimedAt: instant('claimed_at'),
		onSkyAt: instant('on_sky_at'),
		endedAt: instant('ended_at'),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(table) => [
		index('slot_transient').on(table.transientId),
		index('slot_state').on(table.state),
		check(
			'slot_claimed_whole',
			sql`${table.state} in ('offered', 'lapsed') or ${table.claimedBy} is not null`
		)
	]
);

/** What came of a slot. */
export const report = pgTable(
	'report',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		slotId: uuid('slot_id').references(() => slot.id),
		transientId: uuid('transient_id')
			.notNull()
			.references(() => transient.id),
		telescopeId: uuid('telescope_id').references(() => telescope.id),
		kind: text('kind').$type<ReportKind>().notNull(),
		filter: text('filter'),
		/** Middle of the exposure. */
		observedAt: instant('observed_at').notNull(),
		exposureS: doublePrecision('exposure_s'),
		/** Detection: its magnitude. */
		magnitude: doublePrecision('magnitude'),
		magnitudeError: doublePrecision('magnitude_error'),
		/** Limit: the 5-sigma upper limit. */
		limitMag: doublePrecision('limit_mag'),
		raDeg: doublePrecision('ra_deg'),
		decDeg: doublePrecision('dec_deg'),
		remarks: text('remarks').notNull().default(''),
		reportedBy: uuid('reported_by')
			.notNull()
			.references(() => person.id),
		reportedAt: instant('reported_at').notNull().defaultNow(),
		/** Taken back: it stays in the journal and counts nowhere. */
		withdrawnAt: instant('withdrawn_at'),
		withdrawnBy: uuid('withdrawn_by').references(() => person.id)
	},
	(table) => [
		index('report_transient').on(table.transientId),
		check(
			'report_withdrawn_whole',
			sql`(${table.withdrawnAt} is null) = (${table.withdrawnBy} is null)`
		),
		check(
			'report_kind_values',
			sql`(${table.kind} = 'detection') = (${table.magnitude} is not null) and (${table.kind} = 'limit') = (${table.limitMag} is not null)`
		)
	]
);
