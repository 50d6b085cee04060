import { sql } from 'drizzle-orm';
import {
	check,
	doublePrecision,
	index,
	integer,
	jsonb,
	pgTable,
	primaryKey,
	text,
	uuid
} from 'drizzle-orm/pg-core';
import type { Depth, Detector, TelescopeLimits } from '../../../sky/visibility/telescope';
import { instant, timeRange } from '../columns';
import { person } from './people';

export const telescope = pgTable(
	'telescope',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		/** Three letters, on the dusk band and in addresses. */
		code: text('code').notNull().unique(),
		name: text('name').notNull(),
		site: text('site').notNull(),
		apertureM: doublePrecision('aperture_m').notNull(),
		latDeg: doublePrecision('lat_deg').notNull(),
		lonDeg: doublePrecision('lon_deg').notNull(),
		heightM: doublePrecision('height_m').notNull(),
		limits: jsonb('limits').$type<TelescopeLimits>().notNull(),
		detectors: jsonb('detectors').$type<Detector[]>().notNull(),
		/** One entry per filter; the first is the one planned with. */
		depths: jsonb('depths').$type<Depth[]>().notNull(),
		exposureS: doublePrecision('exposure_s').notNull(),
		overheadS: doublePrecision('overhead_s').notNull(),
		maxTiles: integer('max_tiles').notNull().default(24),
		retiredAt: instant('retired_at'),
		updatedAt: instant('updated_at').notNull().defaultNow()
	},
	(table) => [
		check('telescope_code_form', sql`${table.code} ~ '^[A-Z]{3}$'`),
		check('telescope_lat_range', sql`${table.latDeg} between -90 and 90`),
		check('telescope_lon_range', sql`${table.lonDeg} between -180 and 180`)
	]
);

/** Which observers work with which telescope. */
export const telescopeObserver = pgTable(
	'telescope_observer',
	{
		telescopeId: uuid('telescope_id')
			.notNull()
			.references(() => telescope.id, { onDelete: 'cascade' }),
		personId: uuid('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' })
	},
	(table) => [primaryKey({ columns: [table.telescopeId, table.personId] })]
);

/** A stretch in which the site has closed the telescope; it always wins. */
export const closure = pgTable(
	'closure',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		telescopeId: uuid('telescope_id')
			.notNull()
			.references(() => telescope.id, { onDelete: 'cascade' }),
		during: timeRange('during').notNull(),
		reason: text('reason').notNull(),
		enteredBy: uuid('entered_by').references(() => person.id),
		enteredAt: instant('entered_at').notNull().defaultNow()
	},
	(table) => [index('closure_telescope_during').using('gist', table.during)]
);

/** A stretch of duty on the rota. */
export const watch = pgTable('watch', {
	id: uuid('id').primaryKey().defaultRandom(),
	during: timeRange('during').notNull(),
	firstPersonId: uuid('first_person_id')
		.notNull()
		.references(() => person.id),
	secondPersonId: uuid('second_person_id').references(() => person.id)
});
