import { AppError } from '$lib/errors';
import { desc, eq, inArray, sql } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { signedEntry } from '../db/schema/record';
import { seal } from '../revisions/digest';
import * as keys from './keys';
import {
	entryBytes,
	entryHash,
	newKeyBytes,
	timeSource,
	type KeyStatement,
	type PersonalStatement,
	type SignedStatement,
	type Statement,
} from './statement';

type EntryRow = typeof signedEntry.$inferSelect;

/** What was appended, and when by the record's clock. */
export interface Appended {
	index: number;
	at: Date;
}

/**
 * Signs a statement and appends it to the record, in the transaction of what it is about. Throws AppError `unavailable`
 * where the key is missing or unknown to the record, or the clock stands before the last entry.
 */
export async function append(tx: Connection, said: PersonalStatement): Promise<Appended> {
	const key = keys.current();
	await holdRecord(tx);
	let last = await lastOf(tx);
	if (!last) last = await write(tx, undefined, introduction(key), key);
	else await demandKnown(tx, last, key);
	const { index, statement } = await write(tx, last, said, key);
	return { index, at: new Date((JSON.parse(statement) as Statement).time) };
}

/** Lets another key take over: the present one signs for it. From then on only the new one signs. */
export async function rotate(tx: Connection, next: keys.SigningKey): Promise<void> {
	const key = keys.current();
	await holdRecord(tx);
	const last = (await lastOf(tx)) ?? (await write(tx, undefined, introduction(key), key));
	await demandKnown(tx, last, key);
	const known = await keysOf(tx);
	if (known.some(({ id }) => id === next.id)) {
		throw new AppError('conflict', `Key ${next.id} is in the record already.`);
	}
	await write(tx, last, introduction(next), key);
}

/** Keys of the installation, the first one first; the last one signs. */
export async function keysOf(connection: Connection): Promise<KeyStatement['key'][]> {
	const rows = await connection
		.select({ statement: signedEntry.statement })
		.from(signedEntry)
		.where(eq(signedEntry.kind, 'key'))
		.orderBy(signedEntry.index);
	return rows.map(({ statement }) => (JSON.parse(statement) as KeyStatement).key);
}

/** Entries of the record by their index. */
export async function read(
	connection: Connection,
	indexes: readonly number[],
): Promise<SignedStatement[]> {
	const rows = await connection
		.select()
		.from(signedEntry)
		.where(inArray(signedEntry.index, [...indexes]))
		.orderBy(signedEntry.index);
	return rows.map(({ statement, keyId, signature }) => ({
		statement: JSON.parse(statement) as Statement,
		keyId,
		signature,
	}));
}

/** Lets nobody else append until the transaction ends. */
export async function holdRecord(tx: Connection): Promise<void> {
	await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended('signed record', 0))`);
}

async function lastOf(tx: Connection): Promise<EntryRow | undefined> {
	const [last] = await tx.select().from(signedEntry).orderBy(desc(signedEntry.index)).limit(1);
	return last;
}

function introduction({ id, publicKey, sign }: keys.SigningKey): KeyStatement {
	const key = { id, publicKey };
	return { kind: 'key', key, proof: sign(newKeyBytes(key)) };
}

async function demandKnown(tx: Connection, last: EntryRow, key: keys.SigningKey): Promise<void> {
	if (last.kind !== 'key' && last.keyId === key.id) return;
	const newest = (await keysOf(tx)).at(-1);
	if (newest?.id === key.id) return;
	throw new AppError(
		'unavailable',
		`The signing key of the installation (${key.id}) is not the one that its record names (${newest?.id ?? 'none'}). Nothing was signed. Ask the administrator to introduce it.`,
	);
}

async function write(
	tx: Connection,
	last: EntryRow | undefined,
	said: PersonalStatement | KeyStatement,
	key: keys.SigningKey,
): Promise<EntryRow> {
	const { canonical: statement } = seal({
		...said,
		format: 'halfdigit-entry-1',
		index: last ? last.index + 1 : 0,
		time: (await timeAfter(tx, last)).toISOString(),
		timeSource,
		previous: last?.hash ?? null,
	} satisfies Statement);
	const signature = key.sign(entryBytes(statement));
	const row = {
		index: last ? last.index + 1 : 0,
		kind: said.kind,
		statement,
		keyId: key.id,
		signature,
		hash: entryHash(statement, key.id, signature),
	};
	await tx.insert(signedEntry).values(row);
	return row;
}

/** The database's time, which must not lie before that of the last entry. */
async function timeAfter(tx: Connection, last: EntryRow | undefined): Promise<Date> {
	const { rows } = await tx.execute<{ now: string }>(
		sql`select (extract(epoch from signing_time()) * 1000)::bigint::text as now`,
	);
	const now = new Date(Number(rows[0]?.now));
	const before = last && (JSON.parse(last.statement) as Statement).time;
	if (before !== undefined && now.getTime() < Date.parse(before)) {
		throw new AppError(
			'unavailable',
			`The server’s clock was set back: it says ${now.toISOString()}, but the last signature was made at ${before}. Nothing was signed. Ask the administrator to set the clock.`,
		);
	}
	return now;
}
