import type * as Y from 'yjs';
import type { NoteCell } from '$lib/note/document';
import { closeCode } from '$lib/protocol/closing';
import type { ConnectionState, NoteSocket } from './note-socket';
import { UnsavedEdits } from './unsaved-edits';
import type { PutAside, UnsavedStore } from './unsaved-store';

/** Whether what was typed here is stored. `count`: changes that are not, as far as this page knows. */
export interface Saving {
	state: 'saved' | 'saving' | 'offline' | 'refused';
	count: number;
	/** How many of them survive the closing of the page: they are kept in this browser. */
	kept: number;
	/** When the server last stored an edit of this page, ISO 8601. */
	at?: string;
	/** Why a change will not be stored. */
	reason?: string;
	/** Why this browser keeps nothing, a sentence. */
	failure?: string;
}

/** Final close codes after which the same edits may be sent again, by another page or another session. */
const passing: readonly number[] = [
	closeCode.signedOut,
	closeCode.tooMany,
	closeCode.tooManyPages,
	closeCode.presenceTooBig,
];

/** What becomes of the changes made on a page, for the page to show. */
export class SavingModel {
	readonly edits: UnsavedEdits;
	#now = $state.raw<Saving>({ state: 'saved', count: 0, kept: 0 });
	#asides = $state.raw<readonly PutAside[]>([]);
	#connection: ConnectionState = 'connecting';
	#savedAt: string | undefined;
	#refusedFor: string | undefined;
	/** Edits of an earlier page are in the document, or there are none. */
	#merged = false;

	constructor(
		doc: Y.Doc,
		store: UnsavedStore | undefined,
		sheet: () => { title: string; cells: readonly NoteCell[] },
	) {
		this.edits = new UnsavedEdits({ doc, store, sheet, onChange: () => this.#tell() });
	}

	get now(): Saving {
		return this.#now;
	}
	/** Changes that cannot be merged any more, as text for their writer. */
	get asides(): readonly PutAside[] {
		return this.#asides;
	}
	/** Whether something is nowhere but here, so that leaving the page wants a thought. */
	get isUnsaved(): boolean {
		return this.edits.outbox.count > 0 || this.#asides.some(({ key }) => key === undefined);
	}

	/** Brings the edits of an earlier page into the document that has just become complete. */
	async merge(socket: NoteSocket): Promise<void> {
		const earlier = await this.edits.loaded;
		this.#merged = true;
		socket.adopt(earlier);
		this.#tell();
	}

	/** The connection, or what is unsaved, has changed. */
	follow({ connection, closedWith, notice = '' }: NoteSocket): void {
		this.#connection = connection;
		const isFinal = closedWith !== undefined && !passing.includes(closedWith);
		if (isFinal && this.edits.outbox.count > 0) this.refuse(notice);
		this.edits.changed(connection === 'online');
		this.#tell();
	}

	saved(at: string): void {
		this.#savedAt = at;
	}

	/** Nothing unsaved will ever be stored: its writer gets the text. */
	refuse(reason: string): void {
		this.#refusedFor ??= reason;
		void this.edits.putAside(reason);
	}

	#tell(): void {
		const { outbox, kept, asides, failure } = this.edits;
		this.#asides = asides;
		this.#now = {
			state: this.#state(outbox.count),
			count: outbox.count,
			kept,
			...(this.#savedAt && { at: this.#savedAt }),
			...(this.#refusedFor && { reason: this.#refusedFor }),
			...(failure && { failure }),
		};
	}

	#state(count: number): Saving['state'] {
		if (this.#refusedFor) return 'refused';
		if (this.#connection === 'offline' || this.#connection === 'closed') return 'offline';
		return count > 0 || !this.#merged ? 'saving' : 'saved';
	}
}
