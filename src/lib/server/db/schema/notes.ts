import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { Anchor } from '$lib/schemas/comments';
import type { AttachedTrial, TrialChange } from '$lib/schemas/trial';
import {
	bigint,
	boolean,
	customType,
	index,
	integer,
	json,
	jsonb,
	pgTable,
	primaryKey,
	text,
	timestamp,
	unique,
	uuid,
} from 'drizzle-orm/pg-core';
import { person, team } from './people';

const bytea = customType<{ data: Uint8Array; driverData: Buffer }>({
	dataType: () => 'bytea',
	toDriver: (value) => Buffer.from(value),
});

export const note = pgTable(
	'note',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		teamId: uuid('team_id')
			.notNull()
			.references(() => team.id),
		/** Number within the team; shown as MN-014. */
		number: integer('number').notNull(),
		/** The document's title as of the last stored evaluation, for lists. */
		title: text('title').notNull(),
		/** Last sequence number given to an update. Taken under this row's lock. */
		seq: bigint('seq', { mode: 'number' }).notNull().default(0),
		/** Life of the document; changes when it is restored from a backup. */
		epoch: uuid('epoch').notNull().defaultRandom(),
		createdBy: text('created_by')
			.notNull()
			.references(() => person.id),
		createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
		changedAt: timestamp('changed_at', { withTimezone: true }).notNull().defaultNow(),
		changedBy: text('changed_by')
			.notNull()
			.references(() => person.id),
	},
	(t) => [unique('note_number').on(t.teamId, t.number)],
);

/** The working copy: raw update bytes as received, append-only. Old rows are folded, see `fold_updates`. */
export const noteUpdate = pgTable(
	'note_update',
	{
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		seq: bigint('seq', { mode: 'number' }).notNull(),
		/** Chosen by the client; a retry under the same id is stored once. */
		clientEditId: text('client_edit_id').notNull(),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
		bytes: bytea('bytes').notNull(),
		/** Cells that came, went or changed their text with it. */
		cells: text('cells').array().notNull().default([]),
		/** How many edits were folded into the row. */
		edits: integer('edits').notNull().default(1),
		/** Of a folded row: the first sequence number and time of its stretch. Rows of one stretch have the same number. */
		firstSeq: bigint('first_seq', { mode: 'number' }),
		firstAt: timestamp('first_at', { withTimezone: true }),
	},
	(t) => [
		primaryKey({ columns: [t.noteId, t.seq] }),
		unique('note_update_once').on(t.noteId, t.clientEditId),
	],
);

/** Whole states of a document at a sequence number, to load from. All they hold is in the updates too. */
export const noteSnapshot = pgTable(
	'note_snapshot',
	{
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		seq: bigint('seq', { mode: 'number' }).notNull(),
		state: bytea('state').notNull(),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [primaryKey({ columns: [t.noteId, t.seq] })],
);

/** Whose a Yjs client id in a note is. */
export const noteClient = pgTable(
	'note_client',
	{
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		clientId: bigint('client_id', { mode: 'number' }).notNull(),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
	},
	(t) => [primaryKey({ columns: [t.noteId, t.clientId] })],
);

/** Who wrote last in each cell. */
export const cellAuthor = pgTable(
	'cell_author',
	{
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		cellId: text('cell_id').notNull(),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		/** Sequence number of the update. */
		seq: bigint('seq', { mode: 'number' }).notNull(),
		at: timestamp('at', { withTimezone: true }).notNull(),
	},
	(t) => [primaryKey({ columns: [t.noteId, t.cellId] })],
);

/** Last stored results of a note's working copy. */
export const evaluation = pgTable('evaluation', {
	noteId: uuid('note_id')
		.primaryKey()
		.references(() => note.id),
	/** Sequence number of the content below. */
	seq: bigint('seq', { mode: 'number' }).notNull(),
	engine: text('engine').notNull(),
	content: jsonb('content').$type<NoteContent>().notNull(),
	/** Written up to once a second while somebody types and read only as a whole, so it stays the text it came as. */
	results: json('results').$type<Evaluation>().notNull(),
	met: integer('met').notNull(),
	notMet: integer('not_met').notNull(),
	undecided: integer('undecided').notNull(),
	faults: integer('faults').notNull(),
	at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
});

export const thread = pgTable(
	'thread',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		cellId: text('cell_id').notNull(),
		kind: text('kind', { enum: ['question', 'correction', 'remark'] }).notNull(),
		blocking: boolean('blocking').notNull(),
		/** The stretch of the cell's source that it is about; null where that is the whole cell. */
		anchor: jsonb('anchor').$type<Anchor>(),
		/** Set while it is handed back to whoever opened it. */
		answeredAt: timestamp('answered_at', { withTimezone: true }),
		answeredBy: text('answered_by').references(() => person.id),
		closedAt: timestamp('closed_at', { withTimezone: true }),
		closedBy: text('closed_by').references(() => person.id),
	},
	(t) => [index('thread_note').on(t.noteId)],
);

/** What was said in a thread, oldest first; the first one opens it. */
export const comment = pgTable(
	'comment',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		threadId: uuid('thread_id')
			.notNull()
			.references(() => thread.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		body: text('body').notNull(),
		/** Changed inputs that the comment speaks of, and what they moved then. */
		trial: jsonb('trial').$type<AttachedTrial>(),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [index('comment_thread').on(t.threadId, t.at)],
);

/** What became of a thread, beside what was said in it. Rows are only added. */
export const threadChange = pgTable(
	'thread_change',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		threadId: uuid('thread_id')
			.notNull()
			.references(() => thread.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		what: text('what', {
			enum: ['answered', 'closed', 'reopened', 'blocking', 'not blocking'],
		}).notNull(),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [index('thread_change_thread').on(t.threadId, t.at)],
);

/** Who is named in a comment. Its body holds `@{id}` where the name is read. */
export const mention = pgTable(
	'mention',
	{
		commentId: uuid('comment_id')
			.notNull()
			.references(() => comment.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
	},
	(t) => [
		primaryKey({ columns: [t.commentId, t.personId] }),
		index('mention_person').on(t.personId),
	],
);

/** Changed inputs of a note that a person keeps for themselves. */
export const keptTrial = pgTable(
	'kept_trial',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		noteId: uuid('note_id')
			.notNull()
			.references(() => note.id),
		personId: text('person_id')
			.notNull()
			.references(() => person.id),
		title: text('title').notNull(),
		changes: jsonb('changes').$type<TrialChange[]>().notNull(),
		at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
	},
	(t) => [index('kept_trial_person').on(t.noteId, t.personId, t.at)],
);
