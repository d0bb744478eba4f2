import { createHash } from 'node:crypto';
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { desc, gte, sql } from 'drizzle-orm';
import { db, type Connection } from '../db/client';
import { auditLink, checkpoint, signedEntry } from '../db/schema/record';
import { env } from '../env';
import { log } from '../log';
import { holdRecord } from './entries';
import * as keys from './keys';
import { extended, rootOf } from './merkle';

/** A signed size of the record, as C2SP's tlog-checkpoint and signed-note formats write it. */
export interface Checkpoint {
	size: number;
	/** Root of the tree over the entries before `size`, hexadecimal. */
	root: string;
	/** ISO 8601, UTC. */
	time: string;
	/** Position and hash of the audit trail's last link. */
	audit: { position: number; hash: string };
}

/** Name of this installation's record: its address without the scheme. */
export function origin(): string {
	return `${new URL(env().ORIGIN).host}/halfdigit-record`;
}

/** Signs the record's present size where it has grown, and returns the text; call it at the end of a transaction. */
export async function make(tx: Connection): Promise<string | undefined> {
	const key = keys.current();
	await holdRecord(tx);
	const [last] = await tx.select().from(checkpoint).orderBy(desc(checkpoint.size)).limit(1);
	let { size, peaks } = last ?? { size: 0, peaks: [] };
	const added = await tx
		.select({ hash: signedEntry.hash })
		.from(signedEntry)
		.where(gte(signedEntry.index, size))
		.orderBy(signedEntry.index);
	if (added.length === 0) return last?.note;
	for (const { hash } of added) peaks = extended(peaks, size++, hash);
	const time = await databaseTime(tx);
	const audit = await lastLink(tx);
	const note = signed({ size, root: rootOf(peaks), time: time.toISOString(), audit }, key);
	await tx.insert(checkpoint).values({ size, note, peaks, at: time });
	return note;
}

/** Makes a checkpoint by itself and keeps it outside the database. */
export async function makeNow(): Promise<string | undefined> {
	const note = await db().transaction(make);
	await keepOutside(note);
	return note;
}

/**
 * Writes a checkpoint into the folder that CHECKPOINT_FOLDER names; it is called after the commit and never throws: the
 * checkpoint is in the database and can be downloaded.
 */
export async function keepOutside(note: string | undefined): Promise<void> {
	const { CHECKPOINT_FOLDER: folder } = env();
	if (folder === '' || note === undefined) return;
	try {
		await mkdir(folder, { recursive: true });
		const { size, root } = parse(note);
		const file = join(folder, `${String(size).padStart(9, '0')}-${root.slice(0, 12)}.checkpoint`);
		await writeFile(`${file}.new`, note);
		await rename(`${file}.new`, file);
	} catch (error) {
		log().error({ err: error }, 'a checkpoint could not be kept outside the database');
	}
}

/** The checkpoints in a folder, oldest first. */
export async function readFolder(folder: string): Promise<string[]> {
	const names = await readdir(folder).catch(() => []);
	const kept = names.filter((name) => name.endsWith('.checkpoint')).sort();
	return Promise.all(kept.map((name) => readFile(join(folder, name), 'utf8')));
}

/** The newest checkpoint in the database. */
export async function latest(): Promise<{ note: string; at: Date } | undefined> {
	const [row] = await db()
		.select({ note: checkpoint.note, at: checkpoint.at })
		.from(checkpoint)
		.orderBy(desc(checkpoint.size))
		.limit(1);
	return row;
}

/** What a checkpoint's text says, unverified. Throws where it is none. */
export function parse(note: string): Checkpoint {
	const [, size = '', root = '', time = '', audit = ''] = note.split('\n');
	const [, position = '', hash = ''] = /^audit (\d+) ([0-9a-f]*)$/.exec(audit) ?? [];
	if (!/^\d+$/.test(size) || !time.startsWith('time ')) throw new Error('this is no checkpoint');
	return {
		size: Number(size),
		root: Buffer.from(root, 'base64').toString('hex'),
		time: time.slice('time '.length),
		audit: { position: Number(position), hash },
	};
}

/** Whether a checkpoint is signed by the key under the record's origin. */
export function isSigned(note: string, publicKey: string): boolean {
	const end = note.indexOf('\n\n');
	const text = note.slice(0, end + 1);
	const [name = ''] = text.split('\n');
	const [, signer, blob = ''] = /^— (\S+) (\S+)\n$/.exec(note.slice(end + 2)) ?? [];
	const bytes = Buffer.from(blob, 'base64');
	if (end < 0 || signer !== name || !bytes.subarray(0, 4).equals(hint(name, publicKey)))
		return false;
	return keys.isSignedBy(publicKey, Buffer.from(text), bytes.subarray(4).toString('base64'));
}

function signed({ size, root, time, audit }: Checkpoint, key: keys.SigningKey): string {
	const base64 = Buffer.from(root, 'hex').toString('base64');
	const tail = `audit ${audit.position} ${audit.hash}`;
	const text = `${origin()}\n${size}\n${base64}\ntime ${time}\n${tail}\n`;
	const signature = Buffer.from(key.sign(Buffer.from(text)), 'base64');
	const blob = Buffer.concat([hint(origin(), key.publicKey), signature]).toString('base64');
	return `${text}\n— ${origin()} ${blob}\n`;
}

/** First four bytes of the key's hash in a signed note. */
function hint(name: string, publicKey: string): Buffer {
	const hash = createHash('sha256').update(`${name}\n`).update(Buffer.of(1));
	return hash.update(keys.rawOf(publicKey)).digest().subarray(0, 4);
}

async function lastLink(tx: Connection): Promise<Checkpoint['audit']> {
	const [link] = await tx
		.select({ position: auditLink.position, hash: auditLink.hash })
		.from(auditLink)
		.orderBy(desc(auditLink.position))
		.limit(1);
	return link ?? { position: 0, hash: '' };
}

async function databaseTime(tx: Connection): Promise<Date> {
	const { rows } = await tx.execute<{ now: string }>(
		sql`select (extract(epoch from signing_time()) * 1000)::bigint::text as now`,
	);
	return new Date(Number(rows[0]?.now));
}
