import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import {
	bigint,
	bigserial,
	index,
	integer,
	jsonb,
	pgTable,
	text,
	timestamp,
	unique,
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
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [unique('sign_off_once').on(t.candidateId, t.meaning)],
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
	},
	(t) => [
		unique('revision_letter').on(t.noteId, t.letter),
		index('revision_note').on(t.noteId, t.frozenAt),
	],
);

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
