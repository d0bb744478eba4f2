import { cellsOf, titleOf, type NoteCell } from '$lib/note/document';
import type * as Y from 'yjs';
import { Outbox, type UnsavedEdit } from './outbox';
import {
	asideOf,
	type UnsavedStore,
	type KeptEdit,
	type KeptText,
	type PutAside,
} from './unsaved-store';

/** Time after which changes are written down: soon without a connection; with one most are stored by then. */
const pauseMs = { offline: 100, online: 300, failed: 5000 };

/** Why changes of a document that was restored meanwhile are not merged. */
const restoredReason =
	'The note was restored from a backup before these changes were saved, so they were not merged.';

interface Options {
	doc: Y.Doc;
	/** Where they are kept; without one they live as long as the page. */
	store: UnsavedStore | undefined;
	/** The sheet as it is now, for the text of the cells that a change touches. */
	sheet: () => { title: string; cells: readonly NoteCell[] };
	onChange: () => void;
}

/**
 * A page's unacknowledged edits, in memory and in this browser. Edits are kept, not the document: what is
 * missing on the server by its state vector could be another's, and would go there under this person's name.
 * Writing them waits a little, off the way of a key to the other pages.
 */
export class UnsavedEdits {
	readonly outbox = new Outbox();
	/** Changes that survive the closing of the page. */
	kept = 0;
	/** Why changes are not kept in this browser, a sentence. */
	failure: string | undefined;
	/** What cannot be merged any more and waits for its writer to take the text. */
	asides: readonly PutAside[] = [];
	/** What an earlier page kept of this document. Never rejects. */
	readonly loaded: Promise<readonly UnsavedEdit[]>;

	readonly #options: Options;
	/** Ids of the edits that are written down. */
	readonly #written = new Set<string>();
	/** Texts of edits from before this page, by cell. */
	readonly #restored = new Map<string, KeptText>();
	#touched = new Set<string>();
	#timer: ReturnType<typeof setTimeout> | undefined;
	#online = false;
	#closed = false;

	constructor(options: Options) {
		this.#options = options;
		this.loaded = this.#load();
		const { doc } = options;
		titleOf(doc).observe((_, { local }) => {
			if (local) this.#touched.add('title');
		});
		cellsOf(doc).observeDeep((events, { local }) => {
			if (!local) return;
			for (const event of events) {
				const [cellId] = event.path;
				for (const id of cellId === undefined ? event.keys.keys() : [String(cellId)]) {
					this.#touched.add(id);
				}
			}
		});
	}

	/** Takes in a local change that was just made. */
	add(update: Uint8Array): void {
		this.outbox.add(update, this.#touched);
		this.#touched = new Set();
	}

	/** Sees to it that what is unsaved now will be written down, and what is saved be forgotten. */
	changed(online = this.#online): void {
		this.#online = online;
		const isSettled = this.outbox.count === 0 && this.#written.size === 0;
		if (this.#timer || this.#closed || isSettled) return;
		const pause = this.failure ? pauseMs.failed : online ? pauseMs.online : pauseMs.offline;
		this.#timer = setTimeout(() => {
			this.#timer = undefined;
			// What the server is just taking need not be written down.
			void this.write(this.#online ? performance.now() - pause + 50 : undefined);
		}, pause);
	}

	/**
	 * Writes down what was made before a time, everything where none is given. Never rejects. The database keeps
	 * the order of several that run at once, so that the last one before the page goes waits for none.
	 */
	async write(before = Infinity): Promise<void> {
		const { store, onChange } = this.#options;
		if (!store || this.#closed) return;
		const unsaved = this.outbox.all();
		const ids = new Set(unsaved.map(({ id }) => id));
		const open = unsaved.filter(({ id }) => !this.#written.has(id));
		const put = open.filter(({ since }) => since < before);
		const gone = [...this.#written].filter((id) => !ids.has(id));
		if (put.length > 0 || gone.length > 0) {
			try {
				await store.write(
					put.map((edit) => this.#describe(edit)),
					gone,
				);
				for (const { id } of put) this.#written.add(id);
				for (const id of gone) this.#written.delete(id);
				this.failure = undefined;
			} catch (error) {
				this.failure = failureOf(error);
				// The database was taken away, as when the person signs out in another tab.
				if (error instanceof DOMException && error.name === 'InvalidStateError')
					this.#written.clear();
			}
		}
		this.#count();
		onChange();
		if (open.length > put.length || this.failure) this.changed();
	}

	/** Takes every edit out of the way to the server and offers its text instead. */
	async putAside(reason: string): Promise<void> {
		const { store, onChange } = this.#options;
		const edits = this.outbox.all().map((edit) => this.#describe(edit));
		if (edits.length === 0) return;
		this.outbox.settle(edits.map(({ id }) => id));
		const at = new Date().toISOString();
		this.asides = [...this.asides, { key: undefined, at, ...asideOf(reason, edits) }];
		onChange();
		try {
			if (!store) return;
			this.asides = await store.putAside(reason, edits);
			for (const { id } of edits) this.#written.delete(id);
			this.#count();
		} catch (error) {
			this.failure = failureOf(error);
		} finally {
			onChange();
		}
	}

	/** The writer has no more need of a text that was put aside. */
	async discard(aside: PutAside): Promise<void> {
		this.asides = this.asides.filter((other) => other !== aside);
		this.#options.onChange();
		// What is not discarded now is offered again.
		if (aside.key !== undefined) {
			await this.#options.store?.discard(aside.key).catch(() => undefined);
		}
	}

	/** Ends it; what was not written yet is written first. */
	close(): void {
		clearTimeout(this.#timer);
		void this.write().finally(() => this.#options.store?.close());
		this.#closed = true;
	}

	async #load(): Promise<readonly UnsavedEdit[]> {
		const { store, onChange } = this.#options;
		try {
			const found = await store?.load(restoredReason);
			this.asides = found?.asides ?? [];
			for (const edit of found?.edits ?? []) {
				this.#written.add(edit.id);
				for (const text of edit.texts) this.#restored.set(text.cellId, text);
			}
			this.#count();
			return (found?.edits ?? []).map(({ texts, ...edit }) => ({
				...edit,
				cells: new Set(texts.map(({ cellId }) => cellId)),
				since: 0,
			}));
		} catch (error) {
			this.failure = failureOf(error);
			return [];
		} finally {
			onChange();
		}
	}

	#count(): void {
		this.kept = this.outbox
			.all()
			.filter(({ id }) => this.#written.has(id))
			.reduce((sum, { changes }) => sum + changes, 0);
	}

	#describe({ id, update, changes, cells }: UnsavedEdit): KeptEdit {
		const sheet = this.#options.sheet();
		const texts = [...cells].flatMap((cellId): KeptText[] => {
			if (cellId === 'title') {
				return [{ cellId, kind: 'title', terminal: 0, source: sheet.title }];
			}
			const index = sheet.cells.findIndex((cell) => cell.id === cellId);
			const cell = sheet.cells[index];
			const before = this.#restored.get(cellId);
			if (!cell) return before ? [before] : [];
			return [{ cellId, kind: cell.kind, terminal: index + 1, source: cell.source }];
		});
		return { id, update, changes, texts };
	}
}

function failureOf(error: unknown): string {
	const name = error instanceof Error ? error.name : '';
	return name === 'QuotaExceededError'
		? 'This browser has no room left for them.'
		: 'This browser does not keep them.';
}
