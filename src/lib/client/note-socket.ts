import type { Evaluation } from '$lib/calc/results';
import { closeCode, closeSentence, maxMessageBytes } from '$lib/protocol/closing';
import {
	decodeJson,
	encodeEdit,
	messageType,
	type Hello,
	type News,
	type Refused,
	type Saved,
} from '$lib/protocol/messages';
import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { encodeAwarenessUpdate, type Awareness } from 'y-protocols/awareness';
import { messageYjsSyncStep1, messageYjsSyncStep2 } from 'y-protocols/sync';
import { WebsocketProvider } from 'y-websocket';
import * as Y from 'yjs';
import { Outbox } from './outbox';

/** How a page stands to the server. `closed` is final until the page is loaded again. */
export type ConnectionState = 'connecting' | 'online' | 'offline' | 'closed';

interface Events {
	/** Something of `connection`, `count`, `synced` or `mayWrite` changed. */
	onChange: () => void;
	onSaved: (saved: Saved) => void;
	/** An edit will never be stored. */
	onRefused: (reason: string) => void;
	onResults: (results: Evaluation) => void;
	onNews: (news: News) => void;
}

interface Options {
	/** Address of the sync server without the note's id: ws://host/sync */
	url: string;
	noteId: string;
	epoch: string;
	doc: Y.Doc;
	awareness: Awareness;
	events: Events;
	WebSocket?: typeof WebSocket;
}

/**
 * A note's socket on the page's side. Local changes go out as edits with ids and stay in the outbox until the
 * server has stored them; after a break they are sent again under the same ids.
 */
export class NoteSocket {
	connection: ConnectionState = 'connecting';
	/** Whether the document has been complete once. */
	synced = false;
	mayWrite = false;
	/** Why the connection is lost or closed, a sentence. */
	notice: string | undefined;

	readonly #options: Options;
	readonly #provider: WebsocketProvider;
	readonly #outbox = new Outbox();
	#greeted = false;
	#flushing = false;

	constructor(options: Options) {
		this.#options = options;
		const { doc, awareness } = options;
		const provider = new WebsocketProvider(options.url, options.noteId, doc, {
			awareness,
			connect: false,
			disableBc: true,
			shouldReconnect: ({ code }) => !(code >= 4400 && code < 4500) && code !== closeCode.tooBig,
			...(options.WebSocket && { WebSocketPolyfill: options.WebSocket }),
		});
		this.#provider = provider;
		// The provider would send changes without ids, and tell everybody's presence for them.
		doc.off('update', provider._updateHandler);
		awareness.off('update', provider._awarenessUpdateHandler);
		doc.on('update', this.#onUpdate);
		awareness.on('update', this.#onPresence);
		this.#handleMessages();
		provider.on('status', ({ status }) => status === 'connected' && this.#announce());
		provider.on('connection-close', () => this.#onLost());
		provider.on('closed', ({ code }) => this.#close(code));
		provider.connect();
	}

	/** Edits that are not acknowledged. */
	get count(): number {
		return this.#outbox.count;
	}

	/** Gives a connection that may be dead up and makes a new one at once. */
	reconnect(): void {
		if (this.connection === 'closed') return;
		this.#provider.disconnect();
		this.#provider.connect();
	}

	destroy(): void {
		this.#options.doc.off('update', this.#onUpdate);
		this.#options.awareness.off('update', this.#onPresence);
		this.#provider.destroy();
	}

	#handleMessages(): void {
		const { messageHandlers } = this.#provider;
		const { events } = this.#options;
		const on = <T>(type: keyof typeof messageType, handle: (body: T) => void) => {
			messageHandlers[messageType[type]] = (_, decoder) => handle(decodeJson<T>(decoder));
		};
		messageHandlers[messageType.sync] = (_, decoder) => this.#onSync(decoder);
		on<Hello>('hello', (hello) => this.#onHello(hello));
		on<Evaluation>('results', events.onResults);
		on<News>('news', events.onNews);
		on<Saved>('saved', (saved) => {
			this.#outbox.settle(saved.ids);
			events.onSaved(saved);
			this.#flush();
		});
		on<Refused>('refused', ({ id, reason }) => {
			this.#outbox.settle([id]);
			events.onRefused(reason);
			this.#flush();
		});
	}

	#onHello({ epoch, mayWrite }: Hello): void {
		if (epoch !== this.#options.epoch) {
			this.#close(closeCode.otherEpoch);
			this.#provider.disconnect();
			return;
		}
		this.#greeted = true;
		this.connection = 'online';
		this.notice = undefined;
		this.mayWrite = mayWrite;
		this.#flush();
	}

	#onSync(decoder: decoding.Decoder): void {
		if (!this.#greeted) return;
		const { doc } = this.#options;
		const step = decoding.readVarUint(decoder);
		const bytes = decoding.readVarUint8Array(decoder);
		if (step === messageYjsSyncStep1) {
			// The server lacks what something depends on; the answer is stored and acknowledged like any edit.
			this.#outbox.add(Y.encodeStateAsUpdate(doc, bytes));
			this.#flush();
			return;
		}
		Y.applyUpdate(doc, bytes, this);
		if (step === messageYjsSyncStep2) {
			this.#provider.synced = true;
			this.synced = true;
			this.#options.events.onChange();
		}
	}

	readonly #onUpdate = (update: Uint8Array, origin: unknown) => {
		if (origin === this) return;
		this.#outbox.add(update);
		this.#options.events.onChange();
		if (this.#flushing) return;
		// Changes made in one go, as an undo over several cells, travel as one edit.
		this.#flushing = true;
		queueMicrotask(() => {
			this.#flushing = false;
			this.#flush();
		});
	};

	#flush(): void {
		if (this.connection === 'online') {
			for (const { id, update } of this.#outbox.take()) {
				const message = encodeEdit(id, update);
				if (message.length > maxMessageBytes) {
					this.#close(closeCode.tooBig);
					this.#provider.disconnect();
					break;
				}
				this.#send(message);
			}
		}
		this.#options.events.onChange();
	}

	readonly #onPresence = (changes: Record<'added' | 'updated' | 'removed', number[]>) => {
		const { clientID } = this.#options.doc;
		if (Object.values(changes).some((ids) => ids.includes(clientID))) this.#sendPresence();
	};

	#sendPresence(): void {
		const { awareness, doc } = this.#options;
		const encoder = encoding.createEncoder();
		encoding.writeVarUint(encoder, messageType.awareness);
		encoding.writeVarUint8Array(encoder, encodeAwarenessUpdate(awareness, [doc.clientID]));
		this.#send(encoding.toUint8Array(encoder));
	}

	/** Says anew that we are here: the others have struck us off under the number we said it with last. */
	#announce(): void {
		const { awareness } = this.#options;
		awareness.setLocalState(awareness.getLocalState());
	}

	#send(message: Uint8Array): void {
		const { ws } = this.#provider;
		if (this.#provider.wsconnected && ws?.readyState === ws?.OPEN) ws?.send(message);
	}

	#onLost(): void {
		this.#outbox.reset();
		this.#greeted = false;
		if (this.connection !== 'closed') {
			this.connection = 'offline';
			this.notice = closeSentence(0);
		}
		// Pages that lost the same server do not come back in the same moment.
		const pauseMs = Math.min(2 ** (this.#provider.wsUnsuccessfulReconnects + 1) * 100, 5000);
		this.#provider.maxBackoffTime = pauseMs * (0.5 + Math.random() / 2);
		this.#options.events.onChange();
	}

	#close(code: number): void {
		this.connection = 'closed';
		this.notice = closeSentence(code);
		this.#options.events.onChange();
	}
}
