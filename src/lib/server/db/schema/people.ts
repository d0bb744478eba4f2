import {
	boolean,
	index,
	integer,
	pgEnum,
	pgTable,
	primaryKey,
	text,
	timestamp,
	uuid,
} from 'drizzle-orm/pg-core';

export const roleEnum = pgEnum('role', ['reader', 'engineer', 'approver', 'administrator']);

export const team = pgTable('team', {
	id: uuid('id').primaryKey().defaultRandom(),
	name: text('name').notNull(),
	/** Letters before a note's number: MN in MN-014. */
	notePrefix: text('note_prefix').notNull().default('MN'),
	nextNoteNumber: integer('next_note_number').notNull().default(1),
	createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
});

/** Property names `name email emailVerified image` are those the Auth.js adapter asks for. */
export const person = pgTable('person', {
	id: text('id')
		.primaryKey()
		.$defaultFn(() => crypto.randomUUID()),
	name: text('name').notNull(),
	email: text('email').notNull().unique(),
	emailVerified: timestamp('email_verified', { withTimezone: true }),
	image: text('image'),
	passwordHash: text('password_hash'),
	createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
});

export const membership = pgTable(
	'membership',
	{
		teamId: uuid('team_id')
			.notNull()
			.references(() => team.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		role: roleEnum('role').notNull(),
		since: timestamp('since', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [primaryKey({ columns: [t.teamId, t.personId] })],
);

/** `sessionToken` holds the SHA-256 of the cookie's token: a copy of the table opens no session. */
export const session = pgTable(
	'session',
	{
		sessionToken: text('session_token').primaryKey(),
		userId: text('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		teamId: uuid('team_id').references(() => team.id),
		expires: timestamp('expires', { withTimezone: true }).notNull(),
		createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
		/** End of life however much it is used. */
		endsAt: timestamp('ends_at', { withTimezone: true }).notNull(),
		userAgent: text('user_agent'),
	},
	(t) => [index('session_person').on(t.userId)],
);

export const account = pgTable(
	'account',
	{
		userId: text('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		type: text('type').notNull(),
		provider: text('provider').notNull(),
		providerAccountId: text('provider_account_id').notNull(),
		refresh_token: text('refresh_token'),
		access_token: text('access_token'),
		expires_at: integer('expires_at'),
		token_type: text('token_type'),
		scope: text('scope'),
		id_token: text('id_token'),
		session_state: text('session_state'),
	},
	(t) => [primaryKey({ columns: [t.provider, t.providerAccountId] })],
);

export const verificationToken = pgTable(
	'verification_token',
	{
		identifier: text('identifier').notNull(),
		token: text('token').notNull(),
		expires: timestamp('expires', { withTimezone: true }).notNull(),
	},
	(t) => [primaryKey({ columns: [t.identifier, t.token] })],
);

/** One row per try, by account and by address, so that every process sees the same count. */
export const signInAttempt = pgTable(
	'sign_in_attempt',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		email: text('email').notNull(),
		address: text('address').notNull(),
		succeeded: boolean('succeeded').notNull(),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [
		index('sign_in_attempt_email').on(t.email, t.at),
		index('sign_in_attempt_address').on(t.address, t.at),
	],
);
