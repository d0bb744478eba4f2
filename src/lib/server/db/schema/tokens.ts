import { index, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core';
import { person, team } from './people';

/** Tokens with which a person's scripts ask in a team. Revoked ones stay, so that the audit trail can name them. */
export const apiToken = pgTable(
	'api_token',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		personId: text('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		teamId: uuid('team_id')
			.notNull()
			.references(() => team.id),
		name: text('name').notNull(),
		/** SHA-256 of the token, hexadecimal: a copy of the table opens nothing. */
		hash: text('hash').notNull().unique(),
		createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
		/** Written down once a minute at most. */
		lastUsedAt: timestamp('last_used_at', { withTimezone: true }),
		/** null where it lasts until it is revoked. */
		expiresAt: timestamp('expires_at', { withTimezone: true }),
		revokedAt: timestamp('revoked_at', { withTimezone: true }),
	},
	(t) => [index('api_token_person').on(t.personId, t.teamId)],
);
