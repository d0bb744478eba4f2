import { AppError } from '$lib/errors';
import { closeCode, closeSentence, maxMessageBytes } from '$lib/protocol/closing';
import type { Actor } from '$lib/server/auth/access';
import { tokenIn } from '$lib/server/auth/cookie';
import * as sessions from '$lib/server/auth/sessions';
import { hashOf } from '$lib/server/auth/tokens';
import { env } from '$lib/server/env';
import { log } from '$lib/server/log';
import * as notes from '$lib/server/notes/notes';
import { STATUS_CODES, type IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { WebSocketServer } from 'ws';
import { Connection } from './connection';
import { maxSockets } from './limits';
import type { Room } from './room';
import type { Rooms } from './rooms';

interface Admission {
	room: Room;
	actor: Actor;
	session: string;
	mayWrite: boolean;
	takesChanges: boolean;
}

const path = /^\/sync\/([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})$/;

/**
 * Lets pages onto the sockets of notes. A request that no page of ours makes is refused as plain HTTP. A page
 * cannot read that, so one that may not enter gets its socket and a close code. Everything is decided
 * and loaded before the handshake: no message is ever read, or kept, from a stranger.
 */
export class Gate {
	readonly #rooms: Rooms;
	readonly #origin = new URL(env().ORIGIN).origin;
	readonly #server = new WebSocketServer({ noServer: true, maxPayload: maxMessageBytes });
	#shut = false;

	constructor(rooms: Rooms) {
		this.#rooms = rooms;
	}

	/** Turns every later request away. */
	shut(): void {
		this.#shut = true;
	}

	/** Listener of an HTTP server's `upgrade` event. */
	onUpgrade = (request: IncomingMessage, socket: Duplex, head: Buffer): void => {
		const onError = () => socket.destroy();
		socket.on('error', onError);
		const noteId = path.exec(request.url?.split('?')[0] ?? '')?.[1];
		if (this.#shut) return refuse(socket, 503);
		if (!noteId) return refuse(socket, 404);
		if (request.headers.origin !== this.#origin) return refuse(socket, 403);
		void this.#admit(request, noteId).then((admission) => {
			socket.off('error', onError);
			this.#server.handleUpgrade(request, socket, head, (webSocket) => {
				// Counted now, as many may have asked at once.
				const entry = this.#counted(admission);
				if (typeof entry === 'number') webSocket.close(entry, closeSentence(entry));
				else new Connection(webSocket, entry.room, entry);
			});
		});
	};

	#counted(admission: Admission | number): Admission | number {
		if (typeof admission === 'number') return admission;
		const { room, actor } = admission;
		if (room.connections.size >= maxSockets.ofNote) return closeCode.noteCrowded;
		if (this.#rooms.countOf(actor.personId) >= maxSockets.ofPerson) return closeCode.tooManyPages;
		return admission;
	}

	/** Who comes in, or the close code that says why not. */
	async #admit(request: IncomingMessage, noteId: string): Promise<Admission | number> {
		try {
			const token = tokenIn(request.headers.cookie);
			const actor = token && (await sessions.findActor(token));
			if (!actor) return closeCode.signedOut;
			const { mayWrite } = await notes.access(actor, noteId);
			const room = await this.#rooms.open(noteId);
			if (this.#shut) return closeCode.restarting;
			const takesChanges = request.url?.endsWith('?results=changes') ?? false;
			return { room, actor, session: hashOf(token), mayWrite, takesChanges };
		} catch (error) {
			if (error instanceof AppError && error.code === 'forbidden') return closeCode.forbidden;
			if (error instanceof AppError && error.code === 'notFound') return closeCode.notFound;
			log().error({ err: error, noteId }, 'a note could not be opened');
			return closeCode.unavailable;
		}
	}
}

function refuse(socket: Duplex, status: number): void {
	socket.end(
		`HTTP/1.1 ${status} ${STATUS_CODES[status]}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`,
	);
}
