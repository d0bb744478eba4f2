import { once } from 'node:events';
import type { WebSocket } from 'ws';
import * as Y from 'yjs';
import { closeCode } from '$lib/protocol/closing';
import { encodeEdit } from '$lib/protocol/messages';
import { cellsOf } from '$lib/note/document';
import { env } from '$lib/server/env';
import { loadDocument } from '$lib/server/notes/updates';
import { tokenOf } from './operations';
import { addressOf } from './site';
import { spySocket } from './spy-socket';
import type { Stage } from './stage';
import type { TestNote } from './test-note';
import { comesTrue } from './until';

const sockets = 9;
/** Edits of one socket: fewer than a page may send at once. */
const each = 800;

interface Pipe {
	socket: WebSocket;
	doc: Y.Doc;
	name: string;
}

/** Bare sockets that send more edits into a note than a process keeps while the database is away. */
export class Flood {
	readonly #note: TestNote;
	readonly #pipes: readonly Pipe[];

	private constructor(note: TestNote, pipes: readonly Pipe[]) {
		this.#note = note;
		this.#pipes = pipes;
	}

	/** Opens the sockets, as long as somebody may still come in. */
	static async open({ notes, site, postOf }: Stage, round: number): Promise<Flood> {
		const note = notes[0] as TestNote;
		const Socket = spySocket(note.ledger, () => undefined);
		const pipes = Array.from({ length: sockets }, async (_, n) => {
			const cookie = site.cookies[site.cookies.length - 1 - n] ?? '';
			const socket = new Socket(`${addressOf(postOf(0))}/${note.id}`, [], {
				headers: { cookie, origin: env().ORIGIN },
			});
			socket.on('error', () => undefined);
			await once(socket, 'open');
			const { doc } = await loadDocument(note.id);
			return { socket, doc, name: `flood${round * sockets + n}` };
		});
		return new Flood(note, await Promise.all(pipes));
	}

	/** Sends; tells whether the process at last sent somebody away, and asked him to come back. */
	async pour(): Promise<boolean> {
		let isAway = false;
		for (const pipe of this.#pipes) {
			pipe.socket.once('close', (code) => (isAway ||= code === closeCode.unavailable));
			this.#send(pipe);
		}
		return comesTrue(() => isAway, 20_000);
	}

	close(): void {
		for (const { socket } of this.#pipes) socket.terminate();
	}

	#send({ socket, doc, name }: Pipe): void {
		const { ledger, texts } = this.#note;
		const text = cellsOf(doc)
			.get(texts[0] ?? '')
			?.get('source') as Y.Text;
		let count = 0;
		doc.on('update', (update: Uint8Array) => socket.send(encodeEdit(`${name}-${count}`, update)));
		while (count < each) {
			const value = tokenOf(name, (count += 1));
			const from = Y.getState(doc.store, doc.clientID);
			text.insert(text.length, value);
			ledger.wrote(
				{ client: name, kind: 'append', value, over: undefined, acknowledged: false },
				{ client: doc.clientID, from, to: Y.getState(doc.store, doc.clientID) },
			);
		}
	}
}
