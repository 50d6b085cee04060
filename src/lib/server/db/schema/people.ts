import { sql } from 'drizzle-orm';
import { boolean, check, integer, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import type { AdapterAccountType } from '@auth/core/adapters';
import type { Role } from '../../../domain/vocabulary';
import { instant } from '../columns';

/** Somebody invited. Auth.js's user table; `joinedAt` is the first sign-in. */
export const person = pgTable(
	'person',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		name: text('name').notNull(),
		/** Two or three letters shown in brackets on the night strip. */
		initials: text('initials').notNull(),
		email: text('email').notNull().unique(),
		emailVerified: instant('email_verified'),
		image: text('image'),
		organisation: text('organisation').notNull().default(''),
		roles: text('roles').array().$type<Role[]>().notNull(),
		/** Offered for one-click sign-in when the demo switch is on. */
		seeded: boolean('seeded').notNull().default(false),
		invitedAt: instant('invited_at').notNull().defaultNow(),
		joinedAt: instant('joined_at'),
		disabledAt: instant('disabled_at')
	},
	(table) => [
		check('person_email_lower', sql`${table.email} = lower(${table.email})`),
		check(
			'person_roles_known',
			sql`${table.roles} <@ array['duty','observer','pi','partner','steward']::text[] and cardinality(${table.roles}) > 0`
		)
	]
);

export const account = pgTable(
	'account',
	{
		userId: uuid('user_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		type: text('type').$type<AdapterAccountType>().notNull(),
		provider: text('provider').notNull(),
		providerAccountId: text('provider_account_id').notNull(),
		refresh_token: text('refresh_token'),
		access_token: text('access_token'),
		expires_at: integer('expires_at'),
		token_type: text('token_type'),
		scope: text('scope'),
		id_token: text('id_token'),
		session_state: text('session_state')
	},
	(table) => [primaryKey({ columns: [table.provider, table.providerAccountId] })]
);

export const session = pgTable('session', {
	sessionToken: text('session_token').primaryKey(),
	userId: uuid('user_id')
		.notNull()
		.references(() => person.id, { onDelete: 'cascade' }),
	expires: instant('expires').notNull()
});

export const verificationToken = pgTable(
	'verification_token',
	{
		identifier: text('identifier').notNull(),
		token: text('token').notNull(),
		expires: instant('expires').notNull()
	},
	(table) => [primaryKey({ columns: [table.identifier, table.token] })]
);
