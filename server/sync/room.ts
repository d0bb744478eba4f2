import { AppError } from '$lib/errors';
import { cellsOf, toContent } from '$lib/note/document';
import { countStrange } from '$lib/note/shape';
import { takeUpdates } from '$lib/note/take-updates';
import { clientsIn, touchedBy } from '$lib/note/touched';
import { closeCode } from '$lib/protocol/closing';
import {
	encodeJson,
	type Hello,
	type News,
	type Refused,
	type Saved,
} from '$lib/protocol/messages';
import { Scheduler } from '$lib/server/evaluation/scheduler';
import { log } from '$lib/server/log';
import * as authorship from '$lib/server/notes/authorship';
import type { Appended } from '$lib/server/notes/append';
import * as updates from '$lib/server/notes/updates';
import * as Y from 'yjs';
import { CellAuthors } from './cell-authors';
import { completedSince } from './completed';
import type { Connection } from './connection';
import { Follower } from './follower';
import { HeldUpdates } from './held-updates';
import type { Incoming } from './incoming';
import { Journal, type Entry } from './journal';
import * as outgoing from './outgoing';
import { People, type Entry as PersonEntry } from './people';
import { Proof, type Finding } from './proof';
import { ResultStore } from './result-store';
import { ResultsOut } from './results-out';
import { Upkeep } from './upkeep';

interface Events {
	onEmpty: (room: Room) => void;
	/** What is in memory cannot be stored any more. */
	onBroken: (room: Room) => void;
	/** The log has grown by edits of this process. */
	onStored: (room: Room, seq: number) => void;
	/** Something is new of those who are connected here. */
	onPeople: (room: Room, entries: readonly PersonEntry[]) => void;
}

/**
 * A note's document in this process and the pages that have it open. Where a change comes from is its
 * origin: a Connection (a page sent it; it goes to the others), 'pending' (a page sent it, and it may complete
 * what others sent) or 'database' (another process stored it); the last two go to every page.
 */
export class Room {
	readonly noteId: string;
	readonly connections = new Set<Connection>();
	readonly #epoch: string;
	readonly #doc: Y.Doc;
	readonly #proof: Proof;
	readonly #people = new People();
	/** Whose each Yjs client id in the document is. */
	readonly #owners: Map<number, string>;
	readonly #resultsOut = new ResultsOut();
	readonly #journal: Journal<Connection>;
	readonly #scheduler: Scheduler;
	readonly #store: ResultStore;
	readonly #follower: Follower;
	readonly #authors: CellAuthors;
	readonly #upkeep: Upkeep;
	readonly #events: Events;
	readonly #held = new HeldUpdates((message, origin) => this.#broadcast(message, origin));
	/** Counts the document's states, whoever made them. */
	#version = 0;
	#draining = false;

	/** Loads a note. Throws where that fails: there is no room then, and no document. */
	static async load(noteId: string, events: Events): Promise<Room> {
		const [loaded, stored, authors] = await Promise.all([
			updates.loadDocument(noteId),
			ResultStore.read(noteId),
			authorship.read(noteId),
		]);
		const room = new Room(noteId, { ...loaded, authors }, events);
		if (stored && stored.seq === loaded.seq && !loaded.pending) {
			room.#scheduler.adopt({ version: 0, content: stored.content, results: stored.results });
		} else {
			room.#scheduler.request();
		}
		room.#storeResults();
		return room;
	}

	private constructor(
		noteId: string,
		loaded: updates.Loaded & { authors: Awaited<ReturnType<typeof authorship.read>> },
		events: Events,
	) {
		this.noteId = noteId;
		this.#doc = loaded.doc;
		this.#epoch = loaded.epoch;
		this.#owners = loaded.clients;
		this.#events = events;
		this.#proof = new Proof(this.#doc);
		this.#store = new ResultStore(noteId);
		this.#upkeep = new Upkeep(noteId, loaded.snapshotSeq);
		this.#authors = new CellAuthors(noteId, loaded.authors, (message) =>
			this.#broadcast(message, undefined),
		);
		this.#follower = new Follower(noteId, loaded.seq, {
			apply: (rows) => this.#applyRows(rows),
			onCaughtUp: () => this.#storeResults(),
		});
		this.#journal = new Journal(noteId, {
			onSaved: (entries, appended) => this.#onSaved(entries, appended),
			onFailed: (error, entries) => this.#onFailed(error, entries),
		});
		this.#scheduler = new Scheduler(
			() => ({ version: this.#version, content: toContent(this.#doc) }),
			({ results }) => {
				const sent = this.#resultsOut.next(results);
				this.#held.release();
				for (const connection of this.connections) connection.sendResults(sent);
				this.#storeResults();
			},
			noteId,
		);
		this.#doc.on('update', (bytes: Uint8Array, origin: unknown) => {
			this.#version += 1;
			this.#held.add(outgoing.update(bytes), origin, this.connections.size);
			this.#scheduler.request();
		});
	}

	get isEmpty(): boolean {
		return this.connections.size === 0;
	}

	join(connection: Connection): void {
		this.connections.add(connection);
		this.greet(connection);
		connection.send(outgoing.presence(this.#people.all()));
		connection.send(this.#authors.of(cellsOf(this.#doc).keys()));
		const results = this.#scheduler.last?.results;
		if (results) connection.sendResults(this.#resultsOut.again(results));
	}

	/** Tells a page what document this is and what it may do with it; again when that changes. */
	greet(connection: Connection): void {
		const hello: Hello = {
			epoch: this.#epoch,
			mayWrite: connection.mayWrite,
			personId: connection.actor.personId,
			leftOut: countStrange(this.#doc),
		};
		connection.send(encodeJson('hello', hello));
	}

	leave(connection: Connection): void {
		if (!this.connections.delete(connection)) return;
		this.#tellPeople(this.#people.leave(connection), connection);
		if (this.isEmpty) this.#events.onEmpty(this);
	}

	/** Acts on a message; false where its bytes are no update. */
	receive(connection: Connection, incoming: Incoming): boolean {
		switch (incoming.kind) {
			case 'question':
				if (connection.answer.isUnderWay) return true;
				connection.answer.start(Y.encodeStateAsUpdate(this.#doc, incoming.stateVector));
				this.#askForMissing(connection);
				return true;
			case 'more':
				connection.answer.onRead(incoming);
				return true;
			case 'presence':
				this.#tellPeople(this.#people.take(connection, incoming.said), connection);
				return true;
			case 'nothing':
				return true;
			case 'update':
				return refuse(connection, '', 'An edit without an id cannot be stored.');
			case 'edit':
				if (this.#draining) return true;
				if (connection.mayWrite) return this.#edit(connection, incoming.id, incoming.update);
				return refuse(connection, incoming.id, 'Your role does not allow you to change this note.');
		}
	}

	/** Hears that the log has grown to `seq`. */
	hear(seq: number): void {
		this.#follower.hear(seq);
	}

	/** Hears who is in the note on another process. */
	hearPeople(entries: readonly PersonEntry[]): void {
		this.#showPeople(this.#people.hear(entries), undefined);
	}

	/** Those who are connected here; forgets those of whom other processes say nothing any more. */
	countPeople(): readonly PersonEntry[] {
		this.#showPeople(this.#people.forget(), undefined);
		return this.#people.here();
	}

	/** Whether this room's document is the one with that epoch. */
	hasEpoch(epoch: string): boolean {
		return epoch === this.#epoch;
	}

	tell(about: News['about']): void {
		const news: News = { about };
		this.#broadcast(encodeJson('news', news), undefined);
	}

	keepAlive(): void {
		const message = outgoing.presence([]);
		for (const connection of this.connections) connection.keepAlive(message);
	}

	close(code: number): void {
		for (const connection of this.connections) connection.close(code);
	}

	/** Takes no more edits, which their pages keep and send to the next process, and flushes. */
	async drain(): Promise<void> {
		this.#draining = true;
		await this.flush();
	}

	/** Settles when all edits are acknowledged and the results stored. */
	async flush(): Promise<void> {
		await this.#journal.idle();
		await this.#follower.idle();
		await this.#scheduler.idle();
		await this.#store.idle();
	}

	/** Gives the document up. */
	destroy(): void {
		this.#held.release();
		this.#journal.stop();
		this.#proof.stop();
		this.#scheduler.stop();
		this.#store.stop();
		this.#authors.stop();
		this.#upkeep.stop();
		this.#doc.destroy();
	}

	#edit(connection: Connection, id: string, update: Uint8Array): boolean {
		if (!this.#journal.hasRoom) {
			connection.close(closeCode.unavailable);
			return true;
		}
		const finding = this.#judge(connection, update);
		if (finding.kind === 'broken') return false;
		if (finding.kind === 'refused') {
			connection.refusedFor = finding.reason;
			return refuse(connection, id, finding.reason);
		}
		if (finding.kind !== 'good') {
			connection.close(closeCode[finding.kind]);
			return true;
		}
		for (const client of finding.clients) this.#owners.set(client, connection.actor.personId);
		// What it completes may be another page's: then the sender lacks that, and gets everything too.
		const before = updates.isPending(this.#doc) ? Y.encodeStateVector(this.#doc) : undefined;
		const origin = before ? 'pending' : connection;
		const cells = touchedBy(this.#doc, () => takeUpdates(this.#doc, [update], origin));
		const { personId } = connection.actor;
		const by = { personId, owners: this.#owners };
		// The very bytes that came: an update that waits for another makes no Yjs event and is stored all the same.
		this.#journal.add({
			id,
			personId,
			bytes: update,
			clients: finding.clients,
			cells,
			...(before && { completed: completedSince(this.#doc, Y.decodeStateVector(before), by) }),
			senders: [connection],
		});
		this.#askForMissing(connection);
		return true;
	}

	#tellPeople(entries: readonly PersonEntry[], but: Connection): void {
		this.#showPeople(entries, but);
		if (entries.length > 0) this.#events.onPeople(this, entries);
	}

	#showPeople(entries: readonly PersonEntry[], but: Connection | undefined): void {
		if (entries.length > 0) this.#broadcast(outgoing.presence(entries), but);
	}

	#judge(connection: Connection, update: Uint8Array): Finding {
		const { refusedFor, actor } = connection;
		if (refusedFor) return { kind: 'refused', reason: refusedFor };
		// Before anything of a page is stored, what it says of itself tells whose its client id is.
		return this.#proof.judge(
			update,
			actor.personId,
			(id) => this.#owners.get(id) ?? this.#people.personOf(id),
		);
	}

	/** The document in memory is not what is stored, and cannot be: the pages come back to one that is loaded anew. */
	#onFailed(error: unknown, entries: readonly Entry<Connection>[]): void {
		log().error({ err: error, noteId: this.noteId }, 'a room was given up');
		const wrong =
			error instanceof AppError && error.code === 'conflict' ? error.details : undefined;
		const reason =
			'This change is not taken. It was written under the name of somebody else’s page.';
		for (const { id, senders } of entries) {
			if (!Array.isArray(wrong?.ids) || !wrong.ids.includes(id)) continue;
			for (const sender of senders) refuse(sender, id, reason);
		}
		this.#events.onBroken(this);
	}

	/** Asks a page for what pending updates wait for; once only for the same, as it may not have it either. */
	#askForMissing(connection: Connection): void {
		if (!updates.isPending(this.#doc)) return;
		const { pendingStructs, pendingDs } = this.#doc.store;
		const missing = JSON.stringify([[...(pendingStructs?.missing ?? [])], pendingDs?.length]);
		if (connection.askedFor === missing) return;
		connection.askedFor = missing;
		connection.send(outgoing.question(this.#doc));
	}

	#onSaved(entries: readonly Entry<Connection>[], appended: Appended): void {
		const { seq, at } = appended;
		const idsOf = new Map<Connection, string[]>();
		for (const { id, senders } of entries) {
			for (const sender of senders) idsOf.set(sender, [...(idsOf.get(sender) ?? []), id]);
		}
		for (const [connection, ids] of idsOf) {
			const saved: Saved = { ids, seq, at: at.toISOString() };
			connection.send(encodeJson('saved', saved));
		}
		this.#follower.stored(appended);
		this.#hearAuthors(entries, appended);
		this.#storeResults();
		if (appended.first !== undefined) this.#events.onStored(this, seq);
	}

	#hearAuthors(entries: readonly Entry<Connection>[], { first, seq, at }: Appended): void {
		const isPlain = entries.every(({ completed }) => !completed);
		// Where all are new and none completed others, they have their numbers in this order.
		if (first === undefined || seq - first + 1 !== entries.length || !isPlain) {
			this.#authors.hear(entries.flatMap(({ cells }) => cells));
			return;
		}
		this.#authors.know(
			entries.flatMap(({ cells, personId, senders }, index) =>
				cells.map((cellId) => ({
					cellId,
					personId,
					name: senders[0]?.actor.name ?? '',
					seq: first + index,
					at,
				})),
			),
		);
	}

	#applyRows(rows: readonly updates.Row[]): void {
		const broken = rows.find((row) => !this.#proof.passes(row.bytes));
		if (broken) throw new Error(`row ${broken.seq} cannot be read`);
		for (const { bytes, personId } of rows) {
			for (const client of clientsIn(bytes)) {
				if (!this.#owners.has(client)) this.#owners.set(client, personId);
			}
		}
		takeUpdates(
			this.#doc,
			rows.map(({ bytes }) => bytes),
			'database',
		);
		this.#authors.hear(rows.flatMap(({ cells }) => cells));
	}

	/** Stores the newest results, and a snapshot where one is due, if the document they belong to is exactly what is stored at a sequence number. */
	#storeResults(): void {
		const settled = this.#journal.isEmpty && !this.#follower.isBehind;
		if (!settled || updates.isPending(this.#doc)) return;
		this.#upkeep.offer(this.#follower.seq, () => Y.encodeStateAsUpdate(this.#doc));
		const last = this.#scheduler.last;
		if (!last || last.version !== this.#version) return;
		this.#store.keep({ seq: this.#follower.seq, content: last.content, results: last.results });
	}

	#broadcast(message: Uint8Array, but: unknown): void {
		for (const connection of this.connections) {
			if (connection !== but) connection.send(message);
		}
	}
}

function refuse(connection: Connection, id: string, reason: string): true {
	const refused: Refused = { id, reason };
	connection.send(encodeJson('refused', refused));
	return true;
}
