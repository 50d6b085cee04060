import { boolean, index, integer, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import type { Channel, DeliveryState } from '../../../domain/vocabulary';
import { instant } from '../columns';
import { telescope } from './network';
import { person } from './people';
import { transient } from './transients';

/** The next circular's number, without gaps: taken under a row lock in the publishing transaction. */
export const circularCounter = pgTable('circular_counter', {
	series: text('series').primaryKey(),
	last: integer('last').notNull()
});

/** A numbered text for partners. A draft has no number. */
export const circular = pgTable(
	'circular',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		number: integer('number').unique(),
		transientId: uuid('transient_id')
			.notNull()
			.references(() => transient.id),
		title: text('title').notNull(),
		body: text('body').notNull(),
		authorId: uuid('author_id')
			.notNull()
			.references(() => person.id),
		createdAt: instant('created_at').notNull().defaultNow(),
		publishedAt: instant('published_at')
	},
	(table) => [index('circular_transient').on(table.transientId)]
);

/** What a partner asked for. */
export const subscription = pgTable('subscription', {
	personId: uuid('person_id')
		.primaryKey()
		.references(() => person.id, { onDelete: 'cascade' }),
	byEmail: boolean('by_email').notNull().default(true),
	byPush: boolean('by_push').notNull().default(false),
	/** Only transients with an alert of one of these streams; empty means all. */
	streamCodes: text('stream_codes').array().notNull().default([]),
	/** The partner's own telescope, whose outlook goes into the mail. */
	telescopeId: uuid('telescope_id').references(() => telescope.id),
	updatedAt: instant('updated_at').notNull().defaultNow()
});

/** A browser that has allowed Web Push. */
export const pushDevice = pgTable('push_device', {
	id: uuid('id').primaryKey().defaultRandom(),
	personId: uuid('person_id')
		.notNull()
		.references(() => person.id, { onDelete: 'cascade' }),
	name: text('name').notNull(),
	endpoint: text('endpoint').notNull().unique(),
	p256dh: text('p256dh').notNull(),
	auth: text('auth').notNull(),
	createdAt: instant('created_at').notNull().defaultNow(),
	lastSentAt: instant('last_sent_at')
});

/** One circular to one person by one channel. */
export const delivery = pgTable(
	'delivery',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		circularId: uuid('circular_id')
			.notNull()
			.references(() => circular.id),
		personId: uuid('person_id')
			.notNull()
			.references(() => person.id),
		channel: text('channel').$type<Channel>().notNull(),
		state: text('state').$type<DeliveryState>().notNull().default('queued'),
		attempts: integer('attempts').notNull().default(0),
		lastError: text('last_error'),
		queuedAt: instant('queued_at').notNull().defaultNow(),
		endedAt: instant('ended_at')
	},
	(table) => [
		unique('delivery_once').on(table.circularId, table.personId, table.channel),
		index('delivery_state').on(table.state)
	]
);
