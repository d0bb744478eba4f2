import type { Evaluation } from '$lib/calc/results';
import { applyChanges, type Changes } from '$lib/protocol/changes';
import { ownChanges } from '$lib/note/own-changes';
import { takeUpdates } from '$lib/note/take-updates';
import { closeCode, closeSentence, maxMessageBytes } from '$lib/protocol/closing';
import {
	decodeJson,
	encodeEdit,
	messageType,
	type Authors,
	type Hello,
	type News,
	type Refused,
	type Saved,
} from '$lib/protocol/messages';
import { decodePart, encodeMore, PartsInbox, type Part } from '$lib/protocol/parts';
import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { encodeAwarenessUpdate, type Awareness } from 'y-protocols/awareness';
import { messageYjsSyncStep1, messageYjsSyncStep2 } from 'y-protocols/sync';
import { WebsocketProvider } from 'y-websocket';
import * as Y from 'yjs';
import { afterPaint } from './after-paint';
import type { UnsavedEdit } from './outbox';
import type { UnsavedEdits } from './unsaved-edits';

/** How a page stands to the server. `closed` is final until the page is loaded again. */
export type ConnectionState = 'connecting' | 'online' | 'offline' | 'closed';

interface Events {
	/** Something of `connection`, `count`, `synced` or `mayWrite` changed. */
	onChange: () => void;
	onSaved: (saved: Saved) => void;
	/** An edit will never be stored, and with it none that was made after it. */
	onRefused: (reason: string) => void;
	onResults: (results: Evaluation) => void;
	onNews: (news: News) => void;
	onAuthors: (authors: Authors) => void;
}

interface Options {
	/** Address of the sync server without the note's id: ws://host/sync */
	url: string;
	noteId: string;
	epoch: string;
	doc: Y.Doc;
	awareness: Awareness;
	unsaved: UnsavedEdits;
	events: Events;
	WebSocket?: typeof WebSocket;
}

const leftOutSentence =
	'This note holds content that is of no known kind. It is kept, and left out of the sheet, its figures and revisions.';

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
	/** The code it was closed with for good. */
	closedWith: number | undefined;

	readonly #options: Options;
	readonly #provider: WebsocketProvider;
	readonly #unsaved: UnsavedEdits;
	readonly #parts = new PartsInbox();
	#greeted = false;
	/** The newest that came over this socket. */
	#results: Evaluation | undefined;
	/** What waits for the next paint. */
	readonly #owed = new Set<'edits' | 'presence'>();

	constructor(options: Options) {
		this.#options = options;
		this.#unsaved = options.unsaved;
		const { doc, awareness } = options;
		const provider = new WebsocketProvider(options.url, options.noteId, doc, {
			awareness,
			connect: false,
			disableBc: true,
			params: { results: 'changes' },
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
		provider.on('connection-close', (event) => this.#onLost(event?.code));
		provider.on('closed', ({ code }) => this.#close(code));
		provider.connect();
	}

	/** Takes edits of an earlier page into the document and sends them. */
	adopt(edits: readonly UnsavedEdit[]): void {
		if (this.connection === 'closed') return;
		for (const edit of edits) {
			this.#take(edit.update);
			this.#unsaved.outbox.restore(edit);
		}
		this.#sendEdits();
	}

	/** Gives a connection that may be dead up and makes a new one at once. */
	reconnect(): void {
		if (this.connection === 'closed') return;
		this.#provider.disconnect();
		this.#provider.connect();
	}

	destroy(): void {
		this.flush();
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
		messageHandlers[messageType.part] = (_, decoder) => this.#onPart(decodePart(decoder));
		on<Hello>('hello', (hello) => this.#onHello(hello));
		on<Evaluation>('results', (results) => events.onResults((this.#results = results)));
		on<Changes>('changes', (changes) => {
			// The server sends changes only behind results.
			if (this.#results) events.onResults((this.#results = applyChanges(this.#results, changes)));
		});
		on<News>('news', events.onNews);
		on<Saved>('saved', (saved) => {
			this.#unsaved.outbox.settle(saved.ids);
			events.onSaved(saved);
			this.#sendEdits();
		});
		on<Refused>('refused', ({ reason }) => {
			// What was made after it needs it, and would wait for it in the note for ever.
			this.#close(undefined, 'A change was refused, so this page is no longer what is stored.');
			this.#provider.disconnect();
			events.onRefused(reason);
		});
		on<Authors>('authors', events.onAuthors);
	}

	#onHello({ epoch, mayWrite, leftOut }: Hello): void {
		if (epoch !== this.#options.epoch) {
			this.#close(closeCode.otherEpoch);
			this.#provider.disconnect();
			return;
		}
		this.#greeted = true;
		this.connection = 'online';
		this.notice = leftOut ? leftOutSentence : undefined;
		this.mayWrite = mayWrite;
		this.#sendEdits();
	}

	#onSync(decoder: decoding.Decoder): void {
		if (!this.#greeted) return;
		const step = decoding.readVarUint(decoder);
		const bytes = decoding.readVarUint8Array(decoder);
		if (step === messageYjsSyncStep1) {
			this.#giveOwn(bytes);
			return;
		}
		if (step === messageYjsSyncStep2) this.#onWhole(bytes);
		else this.#take(bytes);
	}

	/** A long answer comes in parts, and the next one when the server hears that this one has come. */
	#onPart(part: Part): void {
		if (!this.#greeted) return;
		this.#send(encodeMore(part));
		const whole = this.#parts.take(part);
		if (whole) this.#onWhole(whole);
	}

	/** Everything that the page lacked. */
	#onWhole(bytes: Uint8Array): void {
		this.#take(bytes);
		this.#provider.synced = true;
		this.synced = true;
		this.#options.events.onChange();
	}

	#take(update: Uint8Array): void {
		takeUpdates(this.#options.doc, [update], this);
	}

	/**
	 * The server lacks what something depends on. It gets what this page has made, stored and acknowledged like any
	 * edit; what others made is theirs to send.
	 */
	#giveOwn(stateVector: Uint8Array): void {
		const { doc } = this.#options;
		const lacking = Y.decodeStateVector(stateVector).get(doc.clientID) ?? 0;
		if (Y.getState(doc.store, doc.clientID) <= lacking) return;
		this.#unsaved.add(ownChanges(doc, lacking));
		this.#sendEdits();
	}

	readonly #onUpdate = (update: Uint8Array, origin: unknown) => {
		if (origin === this) return;
		this.#unsaved.add(update);
		this.#options.events.onChange();
		// Changes made in one go, as an undo over several cells, travel as one edit.
		this.#later('edits');
	};

	/** Notes down what is to be sent, and sends it with all else once this page shows what was done. */
	#later(what: 'edits' | 'presence'): void {
		if (this.#owed.size === 0) afterPaint(() => this.flush());
		this.#owed.add(what);
	}

	/** Sends now what waits for the next paint, as before the page goes out of sight. */
	flush(): void {
		const owed = [...this.#owed];
		this.#owed.clear();
		if (owed.includes('edits')) this.#sendEdits();
		if (owed.includes('presence')) this.#sendPresence();
	}

	#sendEdits(): void {
		if (this.connection === 'online') {
			for (const { id, update } of this.#unsaved.outbox.take()) {
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
		if (Object.values(changes).some((ids) => ids.includes(clientID))) this.#later('presence');
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

	#onLost(code = 0): void {
		this.#unsaved.outbox.reset();
		this.#parts.clear();
		this.#greeted = false;
		if (this.connection !== 'closed') {
			this.connection = 'offline';
			this.notice = closeSentence(code);
		}
		// Pages that lost the same server do not come back in the same moment.
		const pauseMs = Math.min(2 ** (this.#provider.wsUnsuccessfulReconnects + 1) * 100, 5000);
		this.#provider.maxBackoffTime = pauseMs * (0.5 + Math.random() / 2);
		this.#options.events.onChange();
	}

	#close(code: number | undefined, notice = closeSentence(code ?? 0)): void {
		this.connection = 'closed';
		this.closedWith = code;
		this.notice = notice;
		this.#options.events.onChange();
	}
}
