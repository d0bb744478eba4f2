import * as idb from 'lib0/indexeddb';
import type { CellKind } from '$lib/note/document';

/** The text of a cell, or of the title, as its writer last saw it. */
export interface KeptText {
	cellId: string;
	kind: CellKind | 'title';
	/** Number of the cell on the sheet then; 0 for the title. */
	terminal: number;
	source: string;
}

/** An edit as it is kept in this browser. */
export interface KeptEdit {
	id: string;
	update: Uint8Array;
	changes: number;
	texts: KeptText[];
}

/** Changes that cannot be stored in the note any more, as text for their writer. */
export interface PutAside {
	/** Absent where it is on this page only. */
	key: number | undefined;
	/** Why, a sentence. */
	reason: string;
	/** ISO 8601 */
	at: string;
	changes: number;
	texts: KeptText[];
}

interface Row extends KeptEdit {
	/** MN-014 */
	number: string;
	at: number;
}

interface AsideRow extends Omit<PutAside, 'key'> {
	noteId: string;
	number: string;
}

/** Which note, in which life of its document, whose. */
interface Place {
	personId: string;
	noteId: string;
	epoch: string;
	/** MN-014 */
	number: string;
}

const edits = 'edits';
const asides = 'asides';
/** How long a page that does not let go of the database can hold up signing out. */
const wipeMs = 2000;
/** What is said to be kept is on the disk. */
const strict = { durability: 'strict' } as const;
const nameOf = (personId: string) => `halfdigit-unsaved-${personId}`;

/**
 * A person's changes that no server has acknowledged, in this browser's own database: one database per person,
 * in it rows by note, epoch and edit id.
 */
export class UnsavedStore {
	readonly #place: Place;
	readonly #db: Promise<IDBDatabase>;

	constructor(place: Place) {
		this.#place = place;
		this.#db = openStore(place.personId);
		// Whoever reads or writes hears of it.
		this.#db.catch(() => undefined);
	}

	/** Edits of this epoch in the order they were made. Those of another are put aside first, never merged. */
	async load(staleReason: string): Promise<{ edits: KeptEdit[]; asides: PutAside[] }> {
		const { noteId, epoch } = this.#place;
		const transaction = (await this.#db).transaction([edits, asides], 'readwrite');
		const [editStore, asideStore] = [edits, asides].map((name) => transaction.objectStore(name));
		const range = IDBKeyRange.bound([noteId], [noteId, []]);
		const [keys, rows] = (await Promise.all([
			idb.getAllKeys(editStore!, range),
			idb.getAll(editStore!, range),
		])) as unknown as [[string, string, string][], Row[]];
		const found = rows.map((row, index) => ({ row, key: keys[index]! }));
		const stale = found.filter(({ key }) => key[1] !== epoch);
		for (const other of new Set(stale.map(({ key }) => key[1]))) {
			const group = stale.filter(({ key }) => key[1] === other);
			asideStore!.add(this.#asideRow(staleReason, inOrder(group.map(({ row }) => row))));
			for (const { key } of group) editStore!.delete(key);
		}
		const kept = await readAsides(asideStore!, noteId);
		const current = found.filter(({ key }) => key[1] === epoch).map(({ row }) => row);
		await finished(transaction);
		return { edits: inOrder(current), asides: kept };
	}

	/** Keeps some edits and forgets others, all or none. */
	async write(put: readonly KeptEdit[], gone: readonly string[]): Promise<void> {
		const { noteId, epoch, number } = this.#place;
		const transaction = (await this.#db).transaction([edits], 'readwrite', strict);
		const store = transaction.objectStore(edits);
		const at = Date.now();
		put.forEach((edit, index) => {
			const row: Row = { ...edit, number, at: at + index / 1000 };
			store.put(row, [noteId, epoch, edit.id]);
		});
		for (const id of gone) store.delete([noteId, epoch, id]);
		await finished(transaction);
	}

	/** Puts edits aside with a reason; returns everything that lies aside for this note. */
	async putAside(reason: string, put: readonly KeptEdit[]): Promise<PutAside[]> {
		const { noteId, epoch } = this.#place;
		const transaction = (await this.#db).transaction([edits, asides], 'readwrite', strict);
		const asideStore = transaction.objectStore(asides);
		asideStore.add(this.#asideRow(reason, put));
		for (const { id } of put) transaction.objectStore(edits).delete([noteId, epoch, id]);
		const all = await readAsides(asideStore, noteId);
		await finished(transaction);
		return all;
	}

	/** Forgets what was put aside under a key. */
	async discard(key: number): Promise<void> {
		const transaction = (await this.#db).transaction([asides], 'readwrite');
		transaction.objectStore(asides).delete(key);
		await finished(transaction);
	}

	close(): void {
		void this.#db.then(
			(db) => db.close(),
			() => undefined,
		);
	}

	#asideRow(reason: string, put: readonly KeptEdit[]): AsideRow {
		const { noteId, number } = this.#place;
		return { noteId, number, at: new Date().toISOString(), ...asideOf(reason, put) };
	}
}

/** What is told of edits that are put aside: of each cell the newest text. */
export function asideOf(
	reason: string,
	put: readonly KeptEdit[],
): Pick<PutAside, 'reason' | 'changes' | 'texts'> {
	const texts = new Map(put.flatMap((edit) => edit.texts.map((text) => [text.cellId, text])));
	return {
		reason,
		changes: put.reduce((sum, { changes }) => sum + changes, 0),
		texts: [...texts.values()].sort((a, b) => a.terminal - b.terminal),
	};
}

/** Unsaved changes and texts put aside that this browser keeps for a person, by note. */
export async function listKept(personId: string): Promise<{ number: string; changes: number }[]> {
	const db = await openStore(personId);
	try {
		const transaction = db.transaction([edits, asides], 'readonly');
		const rows = (await Promise.all(
			[edits, asides].map((name) => idb.rtop(transaction.objectStore(name).getAll())),
		)) as (Row | AsideRow)[][];
		const sums = new Map<string, number>();
		for (const { number, changes } of rows.flat()) {
			sums.set(number, (sums.get(number) ?? 0) + changes);
		}
		return [...sums].map(([number, changes]) => ({ number, changes }));
	} finally {
		db.close();
	}
}

/** Forgets everything that this browser keeps for a person. Their other pages keep nothing from then on. */
export async function wipe(personId: string): Promise<void> {
	const late = new Promise((resolve) => setTimeout(resolve, wipeMs));
	await Promise.race([idb.deleteDB(nameOf(personId)), late]);
}

function openStore(personId: string): Promise<IDBDatabase> {
	return idb.openDB(nameOf(personId), (db) => {
		db.createObjectStore(edits);
		db.createObjectStore(asides, { autoIncrement: true });
	});
}

async function readAsides(store: IDBObjectStore, noteId: string): Promise<PutAside[]> {
	const [keys, rows] = (await Promise.all([
		idb.rtop(store.getAllKeys()),
		idb.rtop(store.getAll()),
	])) as [number[], AsideRow[]];
	return rows.flatMap(({ noteId: of, reason, at, changes, texts }, index) =>
		of === noteId ? [{ key: keys[index]!, reason, at, changes, texts }] : [],
	);
}

/** Settles when a transaction is kept. Asked to commit, it does so even where the page is closed meanwhile. */
function finished(transaction: IDBTransaction): Promise<void> {
	return new Promise((resolve, reject) => {
		const fail = () => reject(transaction.error ?? new Error('the transaction was given up'));
		transaction.oncomplete = () => resolve();
		transaction.onabort = fail;
		transaction.commit();
	});
}

function inOrder(rows: Row[]): Row[] {
	return rows.sort((a, b) => a.at - b.at);
}
