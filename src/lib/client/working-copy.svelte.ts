import type { Evaluation } from '$lib/calc/results';
import * as document from '$lib/note/document';
import { replaceText } from '$lib/note/replace-text';
import type { Authors, News } from '$lib/protocol/messages';
import { Awareness } from 'y-protocols/awareness';
import * as Y from 'yjs';
import { CellList, type LiveCell } from './cell-list.svelte';
import { NoteSocket, type ConnectionState } from './note-socket';
import { othersIn, type Other } from './others';
import { SavingModel, type Saving } from './saving.svelte';
import { syncAddress } from './sync-address';
import { undoManagerOf } from './undo';
import { UnsavedStore, type PutAside } from './unsaved-store';
import { watchWindow } from './window-watch';

interface Options {
	noteId: string;
	/** MN-014 */
	number: string;
	epoch: string;
	person: { id: string; name: string };
	content: document.NoteContent;
	evaluation: Evaluation;
	/** Where to connect; the page's own host unless given. Without a page (on the server) nothing connects. */
	server?: { url: string; WebSocket?: typeof WebSocket };
}

/** Origin of changes made by this class; what carries it can be undone. */
const local = Symbol('local');

/** A note's working copy in the page: the document, its results, who else is there, and what is saved. */
export class WorkingCopy {
	readonly doc = new Y.Doc();
	readonly undoManager: Y.UndoManager;
	readonly #person: Options['person'];
	readonly #cells: CellList;
	readonly #saving: SavingModel;
	readonly #socket: NoteSocket | undefined;
	#newsHandlers: readonly ((about: News['about']) => void)[] = [];
	#awareness: Awareness | undefined;
	#stopWatching: (() => void) | undefined;
	#title = $state('');
	#evaluation = $state.raw<Evaluation>() as Evaluation;
	#connection = $state<ConnectionState>('connecting');
	#notice = $state<string>();
	#closedWith = $state<number>();
	#ready = $state(false);
	#mayWrite = $state(false);
	#people = $state.raw<readonly Other[]>([]);
	#authors = $state.raw<Authors['cells']>({});
	#canUndo = $state(false);
	#canRedo = $state(false);

	constructor(options: Options) {
		const { content, evaluation, person } = options;
		this.#person = person;
		this.#title = content.title;
		this.#evaluation = evaluation;
		this.#cells = new CellList(this.doc, content.cells);
		this.undoManager = undoManagerOf(this.doc, local);
		for (const event of ['stack-item-added', 'stack-item-popped', 'stack-cleared'] as const) {
			this.undoManager.on(event, () => this.#onStack());
		}
		const url = syncAddress();
		const server = options.server ?? (url === undefined ? undefined : { url });
		this.#saving = new SavingModel(this.doc, server && storeOf(options), () => ({
			title: this.#title,
			cells: this.#cells.list,
		}));
		if (server) this.#socket = this.#connect(options, server);
	}

	get awareness(): Awareness {
		return (this.#awareness ??= new Awareness(this.doc));
	}
	/** Cells in sheet order. Entries stay the same objects while only their sources change. */
	get cells(): readonly LiveCell[] {
		return this.#cells.list;
	}
	get title(): string {
		return this.#title;
	}
	/** The newest results. They may be one change behind the cells. */
	get evaluation(): Evaluation {
		return this.#evaluation;
	}
	get connection(): ConnectionState {
		return this.#connection;
	}
	/** What to tell about a connection that is lost or closed, a sentence. */
	get notice(): string | undefined {
		return this.#notice;
	}
	/** The code with which the connection was closed for good. */
	get closedWith(): number | undefined {
		return this.#closedWith;
	}
	get saving(): Saving {
		return this.#saving.now;
	}
	/** Changes that cannot be merged any more, as text for their writer. */
	get asides(): readonly PutAside[] {
		return this.#saving.asides;
	}
	/** Whether the document has been complete once; before that nothing can be edited. */
	get ready(): boolean {
		return this.#ready;
	}
	get mayWrite(): boolean {
		return this.#mayWrite;
	}
	/** Whether something is not stored, so that leaving the page wants a thought. */
	get isUnsaved(): boolean {
		return this.#saving.isUnsaved;
	}
	/** Whether edits make sense now. Without a connection they do: they are sent when it returns. */
	get editable(): boolean {
		return this.#ready && this.#mayWrite && this.#connection !== 'closed';
	}
	/** Others who have the note open, by name. */
	get people(): readonly Other[] {
		return this.#people;
	}
	/** Who wrote last in a cell, as far as it is stored. */
	authorOf(cellId: string): Authors['cells'][string] | undefined {
		return this.#authors[cellId];
	}
	get canUndo(): boolean {
		return this.#canUndo;
	}
	get canRedo(): boolean {
		return this.#canRedo;
	}

	/** The shared text of a cell; undefined before `ready` and where the cell is gone. */
	textOf(cellId: string): Y.Text | undefined {
		return this.#cells.textOf(cellId);
	}

	undo(): void {
		if (this.editable) this.undoManager.undo();
	}

	redo(): void {
		if (this.editable) this.undoManager.redo();
	}

	/** Writes a new title over the old one, changing only what differs. */
	setTitle(title: string): void {
		this.#act(() => replaceText(document.titleOf(this.doc), title));
	}

	/** Adds a cell behind `after` (null: at the top) and returns its id. */
	addCell(kind: document.CellKind, after: string | null, source = ''): string | undefined {
		return this.#act(() => document.addCell(this.doc, kind, after, source));
	}

	/** Moves a cell behind `after` (null: to the top). */
	moveCell(id: string, after: string | null): void {
		this.#act(() => document.moveCell(this.doc, id, after));
	}

	/** Puts a copy behind a cell and returns the copy's id. */
	duplicateCell(id: string): string | undefined {
		return this.#act(() => document.duplicateCell(this.doc, id));
	}

	removeCell(id: string): void {
		this.#act(() => document.removeCell(this.doc, id));
	}

	/** Changes the document as one undo step; gives what the change gives, undefined where nothing may be written. */
	change<T>(work: (doc: Y.Doc) => T): T | undefined {
		return this.#act(() => work(this.doc));
	}

	/** Its writer has no more need of a text that was put aside. */
	discard(aside: PutAside): void {
		void this.#saving.edits.discard(aside);
	}

	/** Makes the note say what it said before, as one change. */
	restore(content: document.NoteContent): void {
		this.#act(() => document.matchContent(this.doc, content));
	}

	/** Tells the others which cell this person is at. */
	setPlace(cellId: string | null): void {
		if (this.#socket) this.awareness.setLocalStateField('cellId', cellId);
	}

	/** Calls `handle` when comments or the review changed; returns what ends that. */
	onNews(handle: (about: News['about']) => void): () => void {
		this.#newsHandlers = [...this.#newsHandlers, handle];
		return () => {
			this.#newsHandlers = this.#newsHandlers.filter((other) => other !== handle);
		};
	}

	destroy(): void {
		this.#stopWatching?.();
		this.#saving.edits.close();
		this.#socket?.destroy();
		this.undoManager.destroy();
		this.#awareness?.destroy();
		this.doc.destroy();
	}

	/** Makes one undo step of a change. */
	#act<T>(change: () => T): T | undefined {
		if (!this.editable) return undefined;
		this.undoManager.stopCapturing();
		const result = this.doc.transact(change, local);
		this.undoManager.stopCapturing();
		return result;
	}

	#connect(
		{ noteId, epoch }: Options,
		server: { url: string; WebSocket?: typeof WebSocket },
	): NoteSocket {
		this.awareness.on('change', () => {
			const people = othersIn(this.awareness.getStates(), this.#person.id);
			// A cursor that moves within a cell changes nothing here.
			if (JSON.stringify(people) !== JSON.stringify(this.#people)) this.#people = people;
		});
		this.#stopWatching = watchWindow({
			onLeaving: (event) => this.isUnsaved && event.preventDefault(),
			onHidden: () => {
				socket.flush();
				void this.#saving.edits.write();
			},
			// What is connected may be dead.
			onNetwork: () => socket.reconnect(),
		});
		const socket: NoteSocket = new NoteSocket({
			...server,
			noteId,
			epoch,
			doc: this.doc,
			awareness: this.awareness,
			unsaved: this.#saving.edits,
			events: {
				onChange: () => this.#onSocket(socket),
				onSaved: ({ at }) => this.#saving.saved(at),
				onRefused: (reason) => this.#saving.refuse(reason),
				onResults: (results) => (this.#evaluation = results),
				onNews: ({ about }) => this.#newsHandlers.forEach((handle) => handle(about)),
				onAuthors: ({ cells }) => (this.#authors = { ...this.#authors, ...cells }),
			},
		});
		return socket;
	}

	#onSocket(socket: NoteSocket): void {
		const { connection, notice, closedWith, synced, mayWrite } = socket;
		this.#connection = connection;
		this.#notice = notice;
		this.#mayWrite = mayWrite;
		this.#closedWith = closedWith;
		this.#saving.follow(socket);
		if (!synced || this.#ready) return;
		this.#ready = true;
		void this.#saving.merge(socket);
		const title = document.titleOf(this.doc);
		title.observe(() => (this.#title = title.toJSON()));
		this.#title = title.toJSON();
		this.#cells.follow();
	}

	#onStack(): void {
		this.#canUndo = this.undoManager.canUndo();
		this.#canRedo = this.undoManager.canRedo();
	}
}

/** A browser that keeps nothing says so when it is asked; programs other than browsers have nothing to keep it in. */
function storeOf({ noteId, epoch, number, person }: Options): UnsavedStore | undefined {
	if (typeof indexedDB === 'undefined' && typeof window === 'undefined') return undefined;
	return new UnsavedStore({ personId: person.id, noteId, epoch, number });
}
