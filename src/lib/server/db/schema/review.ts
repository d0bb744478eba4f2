import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { ProposalDetails, SignatureDetails } from '$lib/schemas/review';
import { sql } from 'drizzle-orm';
import {
	bigint,
	bigserial,
	boolean,
	index,
	integer,
	jsonb,
	pgTable,
	text,
	timestamp,
	unique,
	uniqueIndex,
	uuid,
} from 'drizzle-orm/pg-core';
import { note } from './notes';
import { person, team } from './people';

/** A proposed snapshot. Rows never change (trigger); where it stands is derived from its sign-offs. */
export const candidate = pgTable(
	'candidate',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		/** 1, 2, … within the note. */
		ordinal: integer('ordinal').notNull(),
		/** Sequence number of the working copy it was taken at. */
		seq: bigint('seq', { mode: 'number' }).notNull(),
		content: jsonb('content').$type<NoteContent>().notNull(),
		results: jsonb('results').$type<Evaluation>().notNull(),
		engine: text('engine').notNull(),
		/** People who wrote in the working copy since the last frozen revision. */
		authors: jsonb('authors').$type<{ id: string; name: string }[]>().notNull(),
		/** What was asked when it was proposed. */
		details: jsonb('details').$type<ProposalDetails>(),
		/** SHA-256 of the canonical JSON of the snapshot, hexadecimal; sign-offs bind to it. */
		digest: text('digest').notNull(),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [unique('candidate_ordinal').on(t.noteId, t.ordinal)],
);

/** Prepared, checked, approved or returned. Rows never change (trigger). */
export const signOff = pgTable(
	'sign_off',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		candidateId: uuid('candidate_id')
			.notNull()
			.references(() => candidate.id),
		meaning: text('meaning', { enum: ['prepared', 'checked', 'approved', 'returned'] }).notNull(),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		/** Name as printed at the time. */
		personName: text('person_name').notNull(),
		role: text('role').notNull(),
		reason: text('reason'),
		method: text('method', { enum: ['password'] }).notNull(),
		/** Digest of the candidate that was signed. */
		digest: text('digest').notNull(),
		/** Waivers and cautions that the signature covers. */
		details: jsonb('details').$type<SignatureDetails>().notNull().default({}),
		/** Index of its entry in the signed record. */
		entry: bigint('entry', { mode: 'number' }),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [
		// Several people may check; everything else is signed once.
		uniqueIndex('sign_off_one')
			.on(t.candidateId, t.meaning)
			.where(sql`${t.meaning} <> 'checked'`),
		unique('sign_off_person').on(t.candidateId, t.meaning, t.personId),
	],
);

/** A frozen candidate. Rows never change (trigger). */
export const revision = pgTable(
	'revision',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		candidateId: uuid('candidate_id')
			.notNull()
			.unique()
			.references(() => candidate.id),
		letter: text('letter').notNull(),
		/** RFC 8785 JSON of content, results, engine and sign-offs, as it was digested. */
		canonical: text('canonical').notNull(),
		/** SHA-256 of `canonical` as UTF-8, hexadecimal. */
		digest: text('digest').notNull(),
		frozenAt: timestamp('frozen_at', { withTimezone: true }).notNull(),
		/** Index of its entry in the signed record. */
		entry: bigint('entry', { mode: 'number' }),
	},
	(t) => [
		unique('revision_letter').on(t.noteId, t.letter),
		index('revision_note').on(t.noteId, t.frozenAt),
	],
);

/** A frozen revision taken back by an approver. Rows never change (trigger). */
export const withdrawal = pgTable('withdrawal', {
	revisionId: uuid('revision_id')
		.primaryKey()
		.references(() => revision.id),
	personId: text('person_id')
		.notNull()
		.references(() => person.id),
	/** Name as printed at the time. */
	personName: text('person_name').notNull(),
	role: text('role').notNull(),
	reason: text('reason').notNull(),
	method: text('method', { enum: ['password'] }).notNull(),
	/** Digest of the revision that was withdrawn. */
	digest: text('digest').notNull(),
	/** Index of its entry in the signed record. */
	entry: bigint('entry', { mode: 'number' }).notNull(),
	at: timestamp('at', { withTimezone: true }).notNull(),
});

/** What a team asks of a sign-off. A team without a row has the usual policy, which the defaults are. */
export const signOffPolicy = pgTable('sign_off_policy', {
	teamId: uuid('team_id')
		.primaryKey()
		.references(() => team.id),
	/** People who must check a candidate. */
	checkers: integer('checkers').notNull().default(1),
	authorsMayCheck: boolean('authors_may_check').notNull().default(false),
	/** Whether whoever prepared or wrote it may approve it. */
	authorsMayApprove: boolean('authors_may_approve').notNull().default(false),
	checkersMayApprove: boolean('checkers_may_approve').notNull().default(false),
	/** Whether an undecided requirement blocks freezing as one that is not met does. */
	undecidedBlocks: boolean('undecided_blocks').notNull().default(false),
	/** Whether each open comment blocks freezing, not only those that say so. */
	commentsBlock: boolean('comments_block').notNull().default(false),
	/** Whether the approver may waive requirements. */
	waivers: boolean('waivers').notNull().default(false),
	/** Minutes after signing in during which the password alone signs; later the e-mail address is asked too. */
	identifyAfterMinutes: integer('identify_after_minutes').notNull().default(480),
});

/** Who did what, when and why. Rows never change (trigger). */
export const auditEvent = pgTable(
	'audit_event',
	{
		id: bigserial('id', { mode: 'number' }).primaryKey(),
		teamId: uuid('team_id').references(() => team.id),
		personId: text('person_id').references(() => person.id),
		/** Verb in the past: "candidate proposed". */
		action: text('action').notNull(),
		/** What it was done to: "note:<id>". */
		subject: text('subject').notNull(),
		before: jsonb('before'),
		after: jsonb('after'),
		reason: text('reason'),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [index('audit_event_team').on(t.teamId, t.at)],
);
