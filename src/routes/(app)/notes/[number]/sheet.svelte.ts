import type { EditorView } from '@codemirror/view';
import { createContext, tick } from 'svelte';
import { SvelteSet } from 'svelte/reactivity';
import type { Evaluation } from '$lib/calc/results';
import { OpenLine } from '$lib/client/open-line.svelte';
import { Threads } from '$lib/client/threads.svelte';
import { Trial } from '$lib/client/trial.svelte';
import { WorkingCopy } from '$lib/client/working-copy.svelte';
import type { NoteContext, Place } from '$lib/editor/note-context';
import type { CellKind, NoteContent } from '$lib/note/document';
import type { Anchor, Thread } from '$lib/schemas/comments';
import { anyThread, type ThreadFilter } from '$lib/schemas/thread-filter';
import { CellDrag } from './drag.svelte';
import { Finder } from './finder.svelte';
import type LineDetailType from './detail/LineDetail.svelte';
import { MarginPlaces } from './margin-places';
import { Nearness } from './nearness';
import { askToSet } from './readout/click-to-set';
import { rename } from './rename';
import { Settled } from './settled.svelte';
import { beginTrial } from './trial/trial-deeds';

interface Start {
	note: { id: string; number: string; epoch: string };
	person: { id: string; name: string };
	content: NoteContent;
	evaluation: Evaluation;
	threads: Thread[];
}

/** Where the cursor comes in when a cell is entered with the keyboard. */
type Edge = 'start' | 'end';

/** A piece of a cell's source that is entered, or only shown where the focus is to stay elsewhere. */
interface Spot {
	from: number;
	to: number;
	focus: boolean;
}

export type Target = Edge | Spot;

/** What stands at the sheet's foot: finding, renaming, the list of actions, the list of keys. */
type Tool = { kind: 'find' | 'actions' | 'keys' } | { kind: 'rename'; name: string };

/** The editor that has, or had last, the focus. */
interface ActiveEditor {
	cellId: string;
	kind: CellKind;
	view: EditorView;
}

/** The open sheet: its working copy and threads, and what is being done to them on this page. */
export class Sheet {
	readonly number: string;
	readonly copy: WorkingCopy;
	readonly threads: Threads;
	readonly drag: CellDrag;
	readonly margin = new MarginPlaces();
	readonly nearness = new Nearness();
	readonly settled: Settled;
	/** The worked line that is open. */
	readonly line: OpenLine;
	/** Inputs that this person changes privately. */
	readonly trial: Trial;
	/** Loaded when a line is opened first. */
	LineDetail = $state.raw<typeof LineDetailType>();
	/** Cell whose thread form is open. */
	composing = $state<string>();
	/** The stretch that the thread that is being written is about; absent where that is its whole cell. */
	about = $state.raw<{ cellId: string; anchor: Anchor }>();
	/** Thread that is looked at: what it is about stands out. */
	chosen = $state<string>();
	/** Threads that the margin shows. */
	filter = $state.raw<ThreadFilter>(anyThread);
	readonly person: { id: string; name: string };
	/** Cell below which a divider is searched for; null on an empty sheet. */
	finding = $state<string | null>();
	/** What the dependency picture is about, while it is open: a name, or cell and line of a requirement. */
	depends = $state<string>();
	/** Cells of which only the first line is shown on this page. */
	readonly folded = new SvelteSet<string>();
	readonly finder: Finder;
	/** The note as editors need it. */
	readonly note: NoteContext;
	/** The quantity whose unit and digits are chosen, and what it was asked from. */
	setting = $state.raw<{ name: string; at: Element }>();
	/** Open tool at the sheet's foot. */
	tool = $state.raw<Tool>();
	/** What the last action has to say, a sentence. */
	told = $state('');
	active: ActiveEditor | undefined;
	/** Kind of the cell that is being written in. */
	writing = $state<CellKind>();
	/** The cell that the person is at, or was last. */
	at: string | undefined;
	readonly #doors = new Map<string, (target: Target) => void>();

	constructor({ note, person, content, evaluation, threads }: Start) {
		this.number = note.number;
		this.person = { id: person.id, name: person.name };
		this.copy = new WorkingCopy({
			noteId: note.id,
			number: note.number,
			epoch: note.epoch,
			person: { id: person.id, name: person.name },
			content,
			evaluation,
		});
		this.settled = new Settled({ ...content, evaluation });
		this.drag = new CellDrag(this.copy);
		this.threads = new Threads(note.number, threads);
		const { copy } = this;
		const ask = (name: string, at: Element) => askToSet(this, name, at);
		this.line = new OpenLine(note.number, {
			trial: (name) => beginTrial(this, name),
			picture: (name) => (this.depends = name),
			get setting() {
				return copy.editable ? ask : undefined;
			},
		});
		this.trial = new Trial(note.number);
		this.finder = new Finder(this);
		this.note = {
			get cells() {
				return copy.cells;
			},
			get evaluation() {
				return copy.evaluation;
			},
			go: (place) => this.go(place),
			rename: (name, next) => {
				if (next === undefined) this.tool = { kind: 'rename', name };
				else void rename(this, name, next);
			},
		};
	}

	/** Announces how a cell takes the focus; call what it returns when the cell goes. */
	addDoor(cellId: string, enter: (target: Target) => void): () => void {
		this.#doors.set(cellId, enter);
		// An editor that took the cell over has announced itself by then.
		return () => {
			if (this.#doors.get(cellId) === enter) this.#doors.delete(cellId);
		};
	}

	/** Attachment of the sheet: keeps in mind which cell the person is at. */
	readonly followFocus = (element: HTMLElement): (() => void) => {
		const follow = ({ target }: FocusEvent) => {
			const cell = target instanceof Element && target.closest<HTMLElement>('[data-cell]');
			if (cell) this.at = cell.dataset.cell;
		};
		element.addEventListener('focusin', follow);
		return () => element.removeEventListener('focusin', follow);
	};

	/** Puts the focus into a cell. */
	enter(cellId: string, target: Target = 'end'): void {
		const enter = () => this.#doors.get(cellId)?.(target);
		if (this.folded.delete(cellId)) void tick().then(enter);
		else enter();
	}

	/** Puts the cursor onto a place; with `focus` false it is only shown. */
	go({ cellId, from, to }: Place, focus = true): void {
		this.enter(cellId, { from, to, focus });
	}

	/** Closes the tool at the foot and goes back to where the person was writing. */
	closeTool(): void {
		this.tool = undefined;
		this.refocus();
	}

	/** Goes back to where the person was: the editor, where it was in the same cell, else the cell's terminal. */
	refocus(): void {
		const { active, at } = this;
		if (active && active.cellId === at && !this.folded.has(at)) {
			if (active.view.dom.isConnected) active.view.focus();
			// The editor of a text closes when it loses the focus.
			else this.enter(active.cellId);
		} else if (at !== undefined) this.focusTerminal(at);
	}

	/** Comes to a cell: into its editor, or to the terminal of one that is only read. */
	arrive(cellId: string): void {
		const { copy } = this;
		const kind = copy.cells.find(({ id }) => id === cellId)?.kind;
		if (copy.editable && kind !== 'text' && !this.folded.has(cellId)) this.enter(cellId, 'start');
		else this.focusTerminal(cellId);
		this.at = cellId;
	}

	focusTerminal(cellId: string): void {
		document.querySelector<HTMLElement>(`#cell-${cellId} [aria-haspopup=menu]`)?.focus();
	}

	/** Moves the focus from a cell to the one before or behind it, if there is one. */
	leave(cellId: string, direction: -1 | 1): boolean {
		const { cells } = this.copy;
		const next = cells[cells.findIndex((cell) => cell.id === cellId) + direction];
		if (!next) return false;
		if (this.folded.has(next.id)) this.focusTerminal(next.id);
		else this.enter(next.id, direction > 0 ? 'start' : 'end');
		return true;
	}

	/** Adds a cell and opens it for writing. */
	async add(kind: CellKind, after: string | null): Promise<void> {
		const id = this.copy.addCell(kind, after);
		if (id === undefined) return;
		await tick();
		this.enter(id);
	}

	/** Moves a cell by one place. */
	shift(cellId: string, direction: -1 | 1): void {
		const { cells } = this.copy;
		const index = cells.findIndex((cell) => cell.id === cellId);
		const after = direction < 0 ? index - 2 : index + 1;
		if (index < 0 || after >= cells.length || (direction < 0 && index === 0)) return;
		this.copy.moveCell(cellId, cells[after]?.id ?? null);
	}
}

export const [getSheet, setSheet] = createContext<Sheet>();
