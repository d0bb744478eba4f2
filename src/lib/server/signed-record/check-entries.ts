import { asc, gte } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { signedEntry } from '../db/schema/record';
import { fault, type Fault } from './fault';
import * as keys from './keys';
import { entryBytes, entryHash, newKeyBytes, type Statement } from './statement';

const batch = 2000;

/** The record as it was read, with what does not verify in it. */
export interface ReadRecord {
	/** Statements whose signature is genuine, by the index they were signed with. */
	statements: Map<number, Statement>;
	/** Hashes recomputed from what is stored, in the order of the rows. */
	hashes: string[];
	/** Public keys by their id. */
	keys: Map<string, string>;
	faults: Fault[];
}

/** Reads all entries in order and checks each: place, key, signature, and the hash of the one before. */
export async function checkEntries(
	connection: Connection,
	trusted: readonly string[],
): Promise<ReadRecord> {
	const walk = new Walk(trusted);
	for (let from = 0; ;) {
		const rows = await connection
			.select()
			.from(signedEntry)
			.where(gte(signedEntry.index, from))
			.orderBy(asc(signedEntry.index))
			.limit(batch);
		for (const row of rows) walk.step(row);
		const last = rows.at(-1);
		if (!last || rows.length < batch) return walk.end();
		from = last.index + 1;
	}
}

class Walk {
	readonly #read: ReadRecord = { statements: new Map(), hashes: [], keys: new Map(), faults: [] };
	readonly #trusted: readonly string[];
	#next = 0;
	#before: string | null = null;
	#newestKey: string | undefined;

	constructor(trusted: readonly string[]) {
		this.#trusted = trusted;
	}

	step(row: typeof signedEntry.$inferSelect): void {
		const { statements, hashes, faults } = this.#read;
		const place = `entry ${row.index}`;
		for (; this.#next < row.index; this.#next++) {
			faults.push(fault('deleted', `entry ${this.#next}`, 'It is missing.'));
			this.#before = null;
		}
		this.#next = row.index + 1;
		const hash = entryHash(row.statement, row.keyId, row.signature);
		const statement = parse(row.statement);
		if (statement?.kind === 'key') this.#introduce(place, statement, row.keyId);
		if (!statement || !this.#isGenuine(row, place)) {
			if (!statement) faults.push(fault('edited', place, 'Its statement cannot be read.'));
		} else if (statement.index !== row.index) {
			faults.push(
				statements.has(statement.index)
					? fault('copied', place, `It is a copy of entry ${statement.index}.`)
					: fault('reordered', place, `It was signed as entry ${statement.index}.`),
			);
			if (!statements.has(statement.index)) statements.set(statement.index, statement);
		} else {
			statements.set(row.index, statement);
			const chained = this.#before === null || statement.previous === this.#before;
			if (!chained)
				faults.push(fault('rewritten', place, 'It follows another entry than it names.'));
		}
		if (hash !== row.hash)
			faults.push(fault('edited', place, 'Its hash is not that of the entry.'));
		hashes.push(hash);
		this.#before = hash;
	}

	end(): ReadRecord {
		const { keys: found, faults } = this.#read;
		for (const id of this.#trusted) {
			if (found.size > 0 && !found.has(id)) {
				const sentence = `The trusted key ${id} is not among its keys: it was written anew with another one.`;
				faults.push(fault('other key', 'the record', sentence));
			}
		}
		return this.#read;
	}

	#introduce(place: string, { key, proof }: Statement & { kind: 'key' }, signedBy: string): void {
		const first = this.#read.keys.size === 0;
		const genuine =
			keys.idOf(key.publicKey) === key.id &&
			keys.isSignedBy(key.publicKey, newKeyBytes(key), proof) &&
			(first ? signedBy === key.id : signedBy === this.#newestKey);
		if (!genuine) {
			this.#read.faults.push(
				fault('other key', place, `Key ${key.id} was not introduced rightly.`),
			);
			if (!first) return;
		}
		this.#read.keys.set(key.id, key.publicKey);
		this.#newestKey = key.id;
	}

	#isGenuine({ statement, keyId, signature }: typeof signedEntry.$inferSelect, place: string) {
		const publicKey = this.#read.keys.get(keyId);
		if (publicKey === undefined) {
			const sentence = `It is signed with key ${keyId}, which the record does not know.`;
			this.#read.faults.push(fault('other key', place, sentence));
			return false;
		}
		if (keys.isSignedBy(publicKey, entryBytes(statement), signature)) return true;
		this.#read.faults.push(fault('edited', place, 'Its signature is not genuine.'));
		return false;
	}
}

function parse(text: string): Statement | undefined {
	try {
		return JSON.parse(text) as Statement;
	} catch {
		return undefined;
	}
}
