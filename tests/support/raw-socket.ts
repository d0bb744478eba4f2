import { decodeJson, encodeEdit, messageType, type Saved } from '$lib/protocol/messages';
import { env } from '$lib/server/env';
import * as decoding from 'lib0/decoding';
import { once } from 'node:events';
import { WebSocket } from 'ws';
import { eventually } from './page';
import type { SyncServer } from './server';

interface Message {
	type: number;
	decoder: decoding.Decoder;
}

/** A bare socket, for what no page of ours would send. */
export class RawSocket {
	readonly received: Message[] = [];
	/** Close code once it is closed; for a refused handshake the HTTP status. */
	ended: number | undefined;
	readonly socket: WebSocket;

	constructor(server: Pick<SyncServer, 'url'>, noteId: string, headers: Record<string, string>) {
		this.socket = new WebSocket(`${server.url}/${noteId}`, {
			headers: { origin: env().ORIGIN, ...headers },
		});
		this.socket.binaryType = 'nodebuffer';
		this.socket.on('message', (data: Buffer) => {
			const decoder = decoding.createDecoder(Uint8Array.from(data));
			this.received.push({ type: decoding.readVarUint(decoder), decoder });
		});
		this.socket.on('close', (code) => (this.ended ??= code));
		this.socket.on('error', () => undefined);
		this.socket.on('unexpected-response', (request, response) => {
			this.ended = response.statusCode;
			request.destroy();
		});
	}

	/** Waits until the server has said who it is. */
	async greeted(): Promise<this> {
		await eventually(() => this.received.some(({ type }) => type === messageType.hello));
		return this;
	}

	/** Waits for the end and returns its code. */
	async end(): Promise<number> {
		await eventually(() => this.ended !== undefined);
		return this.ended ?? 0;
	}

	send(bytes: Uint8Array): void {
		this.socket.send(bytes);
	}

	/** Sends an edit and waits until the server calls it saved. */
	async save(id: string, update: Uint8Array): Promise<void> {
		const from = this.received.length;
		this.send(encodeEdit(id, update));
		await eventually(() =>
			this.received.slice(from).some(({ type, decoder }) => {
				if (type !== messageType.saved) return false;
				const { ids } = decodeJson<Saved>(decoding.clone(decoder));
				return ids.includes(id);
			}),
		);
	}

	/** Bodies of the messages of a type whose body is JSON. */
	bodies<T>(type: number): T[] {
		return this.received
			.filter((message) => message.type === type)
			.map(({ decoder }) => decodeJson<T>(decoding.clone(decoder)));
	}

	async close(): Promise<void> {
		if (this.socket.readyState === WebSocket.CLOSED) return;
		this.socket.close();
		await once(this.socket, 'close');
	}
}
