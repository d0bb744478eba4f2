import { may } from '$lib/schemas/role';
import { closeCode } from '$lib/protocol/closing';
import { standing } from '$lib/server/auth/standing';
import { listen, type Hint, type Listener } from '$lib/server/db/notify';
import { log } from '$lib/server/log';
import { heads } from '$lib/server/notes/updates';
import type { Connection } from './connection';
import { Neighbours } from './neighbours';
import { Room } from './room';

const graceMs = 30_000;
const pollMs = 1000;
/** Other processes hear so often that this one runs, and who is in it. */
const beatMs = 5000;
const keepAliveMs = 9000;

/** The rooms of this process: one per note, loaded once however many pages wait for it. */
export class Rooms {
	readonly #rooms = new Map<string, Promise<Room>>();
	/** Rooms that are loaded, by note. */
	readonly #open = new Map<string, Room>();
	readonly #neighbours = new Neighbours();
	readonly #unloading = new Map<Room, NodeJS.Timeout>();
	readonly #timers: NodeJS.Timeout[];
	readonly #listener: Listener;
	#polling: Promise<void> | undefined;

	constructor() {
		this.#listener = listen(
			(hint) => this.#onHint(hint),
			() => this.#onGap(),
		);
		this.#timers = [
			setInterval(() => {
				this.#polling ??= this.#poll();
			}, pollMs),
			setInterval(() => this.#open.forEach((room) => room.keepAlive()), keepAliveMs),
			setInterval(() => this.#beat(), beatMs),
		];
	}

	/** The room of a note. Rejects where the note cannot be loaded; the next call tries again. */
	async open(noteId: string): Promise<Room> {
		const room = await (this.#rooms.get(noteId) ?? this.#load(noteId));
		if (room.isEmpty) this.#unloadLater(room);
		return room;
	}

	/** Sockets a person has open here. */
	countOf(personId: string): number {
		return this.#connections().filter(({ actor }) => actor.personId === personId).length;
	}

	/** Takes no more edits, and settles when everything that was taken is stored and acknowledged. */
	async drain(): Promise<void> {
		await Promise.all([...this.#open.values()].map((room) => room.drain()));
	}

	/** Closes every socket. */
	close(code: number): void {
		for (const room of this.#open.values()) room.close(code);
	}

	/** Ends what runs besides the rooms, and gives the rooms up. */
	async stop(): Promise<void> {
		this.#timers.forEach(clearInterval);
		this.#unloading.forEach(clearTimeout);
		await this.#neighbours.stop();
		await this.#listener.close();
		await this.#polling;
		for (const room of this.#open.values()) room.destroy();
	}

	#load(noteId: string): Promise<Room> {
		const loading = Room.load(noteId, {
			onEmpty: (room) => this.#unloadLater(room),
			onBroken: (room) => {
				this.#forget(room);
				room.close(closeCode.unavailable);
			},
			onStored: (room, seq) => this.#neighbours.announce(room.noteId, seq),
			onPeople: (room, entries) => this.#neighbours.sayPeople(room.noteId, entries),
		});
		this.#rooms.set(noteId, loading);
		return loading.then(
			(room) => {
				this.#open.set(noteId, room);
				this.#neighbours.ask(noteId);
				return room;
			},
			(error: unknown) => {
				this.#rooms.delete(noteId);
				throw error;
			},
		);
	}

	#unloadLater(room: Room): void {
		if (this.#open.get(room.noteId) !== room) return;
		clearTimeout(this.#unloading.get(room));
		const timer: NodeJS.Timeout = setTimeout(() => void this.#unload(room, timer), graceMs);
		this.#unloading.set(room, timer);
	}

	async #unload(room: Room, timer: NodeJS.Timeout): Promise<void> {
		await room.flush();
		// Whoever asked for the room meanwhile has set another timer, and may be about to come in.
		if (room.isEmpty && this.#unloading.get(room) === timer) this.#forget(room);
	}

	#forget(room: Room): void {
		if (this.#open.get(room.noteId) !== room) return;
		this.#open.delete(room.noteId);
		clearTimeout(this.#unloading.get(room));
		this.#unloading.delete(room);
		this.#rooms.delete(room.noteId);
		room.destroy();
	}

	#connections(): Connection[] {
		return [...this.#open.values()].flatMap((room) => [...room.connections]);
	}

	#onHint(hint: Hint): void {
		if ('noteId' in hint) {
			this.#open.get(hint.noteId)?.tell(hint.about);
			return;
		}
		const who = this.#neighbours.hear(hint.from);
		if (who === 'own') return;
		// A process that has just begun knows nobody yet.
		if (who === 'new') this.#beat();
		for (const [noteId, seq] of Object.entries(hint.seqs ?? {})) this.#open.get(noteId)?.hear(seq);
		for (const noteId of hint.asks ?? []) {
			this.#neighbours.sayPeople(noteId, this.#open.get(noteId)?.countPeople() ?? []);
		}
		for (const [noteId, people] of Object.entries(hint.people ?? {})) {
			const entries = people.map(([clientId, clock, state]) => ({ clientId, clock, state }));
			this.#open.get(noteId)?.hearPeople(entries);
		}
	}

	/** Says that this process runs and who is in it, and forgets those of whom others say nothing any more. */
	#beat(): void {
		this.#neighbours.beat();
		for (const room of this.#open.values()) {
			this.#neighbours.sayPeople(room.noteId, room.countPeople());
		}
	}

	#onGap(): void {
		this.#polling ??= this.#poll();
		this.#beat();
		for (const room of this.#open.values()) {
			room.tell('comments');
			room.tell('review');
		}
	}

	/** Reads what hints may have missed: grown logs, notes restored or gone, sessions ended, roles changed. */
	async #poll(): Promise<void> {
		try {
			await Promise.all([this.#pollRooms(), this.#pollSessions()]);
		} catch (error) {
			log().warn({ err: error }, 'the poll of the open notes failed');
		}
		this.#polling = undefined;
	}

	async #pollRooms(): Promise<void> {
		const rooms = [...this.#open.values()];
		if (rooms.length === 0) return;
		const found = await heads(rooms.map((room) => room.noteId));
		for (const room of rooms) {
			const head = found.get(room.noteId);
			if (head && room.hasEpoch(head.epoch)) {
				room.hear(head.seq);
				continue;
			}
			room.close(head ? closeCode.otherEpoch : closeCode.notFound);
			this.#forget(room);
		}
	}

	async #pollSessions(): Promise<void> {
		const connections = this.#connections();
		if (connections.length === 0) return;
		const roles = await standing([...new Set(connections.map(({ session }) => session))]);
		for (const connection of connections) {
			const role = roles.get(connection.session);
			if (!role) connection.close(closeCode.signedOut);
			else if (!may(role, 'readWorkingCopy')) connection.close(closeCode.forbidden);
			else connection.permit(may(role, 'write'));
		}
	}
}
