import { index, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core';
import { person } from './people';
import { revision } from './review';

/** Links that show one frozen revision without an account. Revoked ones stay, so that the audit trail can name them. */
export const sharedLink = pgTable(
	'shared_link',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		revisionId: uuid('revision_id')
			.notNull()
			.references(() => revision.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		/** For whom it was made. */
		name: text('name').notNull(),
		/** SHA-256 of the token, hexadecimal: a copy of the table opens nothing. */
		hash: text('hash').notNull().unique(),
		/** null where none is asked. */
		passwordHash: text('password_hash'),
		createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
		/** Written down once a minute at most. */
		lastUsedAt: timestamp('last_used_at', { withTimezone: true }),
		/** null where it lasts until it is revoked. */
		expiresAt: timestamp('expires_at', { withTimezone: true }),
		revokedAt: timestamp('revoked_at', { withTimezone: true }),
	},
	(t) => [index('shared_link_revision').on(t.revisionId, t.createdAt)],
);
