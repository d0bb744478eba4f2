import { may } from '$lib/schemas/role';
import { closeCode } from '$lib/protocol/closing';
import { standing } from '$lib/server/auth/standing';
import { listen, type Hint, type Listener } from '$lib/server/db/notify';
import { log } from '$lib/server/log';
import { heads } from '$lib/server/notes/updates';
import type { Connection } from './connection';
import { Room } from './room';

const graceMs = 30_000;
const pollMs = 2000;
const keepAliveMs = 9000;

/** The rooms of this process: one per note, loaded once however many pages wait for it. */
export class Rooms {
	readonly #rooms = new Map<string, Promise<Room>>();
	/** Rooms that are loaded. */
	readonly #open = new Set<Room>();
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
		await Promise.all([...this.#open].map((room) => room.drain()));
	}

	/** Closes every socket. */
	close(code: number): void {
		for (const room of this.#open) room.close(code);
	}

	/** Ends what runs besides the rooms, and gives the rooms up. */
	async stop(): Promise<void> {
		this.#timers.forEach(clearInterval);
		this.#unloading.forEach(clearTimeout);
		await this.#listener.close();
		await this.#polling;
		for (const room of this.#open) room.destroy();
	}

	#load(noteId: string): Promise<Room> {
		const loading = Room.load(noteId, {
			onEmpty: (room) => this.#unloadLater(room),
			onBroken: (room) => {
				this.#forget(room);
				room.close(closeCode.unavailable);
			},
		});
		this.#rooms.set(noteId, loading);
		return loading.then(
			(room) => {
				this.#open.add(room);
				return room;
			},
			(error: unknown) => {
				this.#rooms.delete(noteId);
				throw error;
			},
		);
	}

	#unloadLater(room: Room): void {
		if (!this.#open.has(room)) return;
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
		if (!this.#open.delete(room)) return;
		clearTimeout(this.#unloading.get(room));
		this.#unloading.delete(room);
		this.#rooms.delete(room.noteId);
		room.destroy();
	}

	#connections(): Connection[] {
		return [...this.#open].flatMap((room) => [...room.connections]);
	}

	#onHint(hint: Hint): void {
		for (const room of this.#open) {
			if (room.noteId !== hint.noteId) continue;
			if ('seq' in hint) room.hear(hint.seq);
			else room.tell(hint.about);
		}
	}

	#onGap(): void {
		this.#polling ??= this.#poll();
		for (const room of this.#open) {
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
		const rooms = [...this.#open];
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
