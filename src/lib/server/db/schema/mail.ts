import { mailKinds, mailWays, type Said } from '$lib/schemas/mail';
import {
	index,
	integer,
	jsonb,
	pgTable,
	primaryKey,
	text,
	timestamp,
	unique,
	uuid,
} from 'drizzle-orm/pg-core';
import { person, team } from './people';

/** Mail to people: written in the transaction of the deed that it tells of, handed over by a job later. */
export const mail = pgTable(
	'mail',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		teamId: uuid('team_id')
			.notNull()
			.references(() => team.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		kind: text('kind', { enum: [...mailKinds, 'daily'] }).notNull(),
		/** What it tells of; the same is told to a person once. */
		key: text('key').notNull(),
		/** Several where it gathers a day's. */
		said: jsonb('said').$type<Said[]>().notNull(),
		/**
		 * `gathered`: waits for the mail of the day, `told`: went with it. `sending` lasts while it is handed over; what a
		 * broken connection or process leaves so becomes `unknown`, and is sent again only where somebody decides that.
		 */
		state: text('state', {
			enum: ['waiting', 'gathered', 'told', 'sending', 'sent', 'failed', 'unknown', 'dropped'],
		}).notNull(),
		/** When its job was queued. */
		queuedAt: timestamp('queued_at', { withTimezone: true }),
		/** When handing it over began last. */
		sendingAt: timestamp('sending_at', { withTimezone: true }),
		tries: integer('tries').notNull().default(0),
		/** Why it did not go out. */
		reason: text('reason').notNull().default(''),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
		sentAt: timestamp('sent_at', { withTimezone: true }),
	},
	(t) => [
		unique('mail_once').on(t.personId, t.key),
		index('mail_state').on(t.state, t.at),
		index('mail_team').on(t.teamId, t.at),
	],
);

/** How people want mail of a kind where it is not at once. */
export const mailPreference = pgTable(
	'mail_preference',
	{
		personId: text('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: mailKinds }).notNull(),
		way: text('way', { enum: mailWays }).notNull(),
	},
	(t) => [primaryKey({ columns: [t.personId, t.kind] })],
);
