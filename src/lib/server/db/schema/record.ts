import { bigint, jsonb, pgTable, text, timestamp } from 'drizzle-orm/pg-core';

/**
 * The signed record of the installation: one entry per signature, frozen revision, withdrawal and key, each bound to
 * the one before it. Rows never change (trigger).
 */
export const signedEntry = pgTable('signed_entry', {
	/** 0, 1, … without a gap. */
	index: bigint('index', { mode: 'number' }).primaryKey(),
	kind: text('kind').notNull(),
	/** Canonical JSON of the statement, as it was signed. */
	statement: text('statement').notNull(),
	/** Id of the key that signed it. */
	keyId: text('key_id').notNull(),
	/** Ed25519, base64. */
	signature: text('signature').notNull(),
	/** Hash of the whole entry, hexadecimal: what the next one names, and a leaf of the record's tree. */
	hash: text('hash').notNull(),
});

/** Signed sizes of the record. Rows never change (trigger); copies are kept outside the database. */
export const checkpoint = pgTable('checkpoint', {
	/** Number of entries it covers. */
	size: bigint('size', { mode: 'number' }).primaryKey(),
	/** Signed text. */
	note: text('note').notNull(),
	/** Hashes of the perfect trees that make up the record at this size, largest first. */
	peaks: jsonb('peaks').$type<string[]>().notNull(),
	at: timestamp('at', { withTimezone: true }).notNull(),
});

/** Chains the audit trail in the order of its commits. Rows are added by a trigger and never change. */
export const auditLink = pgTable('audit_link', {
	/** 1, 2, … without a gap. */
	position: bigint('position', { mode: 'number' }).primaryKey(),
	eventId: bigint('event_id', { mode: 'number' }).notNull().unique(),
	/** SHA-256 of the hash before it and the event, hexadecimal. */
	hash: text('hash').notNull(),
});
