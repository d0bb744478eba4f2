import { closeCode, closeSentence } from '$lib/protocol/closing';
import type { Actor } from '$lib/server/auth/access';
import { log } from '$lib/server/log';
import type { RawData, WebSocket } from 'ws';
import { Answer } from './answer';
import { decode, PresenceTooBig, type Incoming } from './incoming';
import { Allowance, maxUnread } from './limits';
import type { SentResults } from './results-out';
import type { Room } from './room';

/** Time in which a page must take note of a closing. */
const closingMs = 15_000;

/** One page's socket in a room. Reads and judges what comes in, and sends what the room says. */
export class Connection {
	readonly actor: Actor;
	/** Hash of the session that opened it. */
	readonly session: string;
	/** What the room last asked this page for; it is not asked for the same twice. */
	askedFor: string | undefined;
	/** Why an edit of this page was refused; what it made after that needs it, and is refused with it. */
	refusedFor: string | undefined;
	/** What the page asked for. */
	readonly answer = new Answer((message) => this.send(message));

	#mayWrite: boolean;
	readonly #socket: WebSocket;
	readonly #room: Room;
	readonly #allowance = new Allowance();
	/** Whether the page is told what changed in results instead of all of them. */
	readonly #takesChanges: boolean;
	#heldResults: SentResults | undefined;
	/** Whether the page was sent the newest results. */
	#hasNewest = false;
	#heard = true;

	constructor(
		socket: WebSocket,
		room: Room,
		who: { actor: Actor; session: string; mayWrite: boolean; takesChanges: boolean },
	) {
		this.#socket = socket;
		this.#room = room;
		this.actor = who.actor;
		this.session = who.session;
		this.#mayWrite = who.mayWrite;
		this.#takesChanges = who.takesChanges;
		socket.on('message', (data, isBinary) => this.#onMessage(data, isBinary));
		socket.on('pong', () => (this.#heard = true));
		// A message over the limit or a broken frame: ws closes the socket with the right code by itself.
		socket.on('error', (error) => log().info({ err: error }, 'a socket failed'));
		socket.on('close', () => room.leave(this));
		room.join(this);
	}

	get mayWrite(): boolean {
		return this.#mayWrite;
	}

	/** Says whether the page may write from now on, and tells it where that is new. */
	permit(mayWrite: boolean): void {
		if (mayWrite === this.#mayWrite) return;
		this.#mayWrite = mayWrite;
		this.#room.greet(this);
	}

	send(message: Uint8Array): void {
		if (this.#socket.readyState !== this.#socket.OPEN) return;
		if (this.#socket.bufferedAmount > maxUnread.all) {
			this.close(closeCode.tooSlow);
			return;
		}
		this.#socket.send(message, () => this.#sendHeldResults());
	}

	/** Sends results, or keeps the newest until a slow page has read what it was sent. */
	sendResults(results: SentResults): void {
		if (this.#socket.bufferedAmount > maxUnread.results) {
			this.#heldResults = results;
			this.#hasNewest = false;
			return;
		}
		const isNext = this.#takesChanges && this.#hasNewest;
		this.#heldResults = undefined;
		this.#hasNewest = true;
		this.send(isNext && results.changes ? results.changes() : results.whole());
	}

	close(code: number): void {
		if (this.#socket.readyState !== this.#socket.OPEN) return;
		this.#socket.close(code, closeSentence(code));
		// A page that reads nothing does not read this either.
		setTimeout(() => this.#socket.terminate(), closingMs).unref();
	}

	/** Ends a socket whose other side is gone; otherwise sends something, so that the page knows we are not. */
	keepAlive(message: Uint8Array): void {
		if (!this.#heard) {
			this.#socket.terminate();
			return;
		}
		this.#heard = false;
		this.#socket.ping();
		this.send(message);
	}

	#sendHeldResults(): void {
		const held = this.#heldResults;
		if (!held || this.#socket.bufferedAmount > maxUnread.results) return;
		this.#heldResults = undefined;
		this.#hasNewest = true;
		this.send(held.whole());
	}

	#onMessage(data: RawData, isBinary: boolean): void {
		if (this.#socket.readyState !== this.#socket.OPEN) return;
		// ws gives one Buffer per message, as its binaryType is left at its default.
		const message = data as Buffer;
		this.#heard = true;
		if (!this.#allowance.take(message.length)) {
			this.close(closeCode.tooMany);
			return;
		}
		const incoming = isBinary ? this.#decode(message) : closeCode.malformed;
		if (typeof incoming === 'number') this.close(incoming);
		else if (!this.#room.receive(this, incoming)) this.close(closeCode.malformed);
	}

	/** The message, or the close code that says why there is none. */
	#decode(message: Uint8Array): Incoming | number {
		try {
			return decode(message);
		} catch (error) {
			log().info({ err: error, personId: this.actor.personId }, 'a message could not be read');
			return error instanceof PresenceTooBig ? closeCode.presenceTooBig : closeCode.malformed;
		}
	}
}
