import { createContext, tick } from 'svelte';
import type { Evaluation } from '$lib/calc/results';
import { OpenLine } from '$lib/client/open-line.svelte';
import { Threads } from '$lib/client/threads.svelte';
import { WorkingCopy } from '$lib/client/working-copy.svelte';
import type { CellKind, NoteContent } from '$lib/note/document';
import type { Thread } from '$lib/schemas/comments';
import { CellDrag } from './drag.svelte';
import type LineDetailType from './detail/LineDetail.svelte';
import { MarginPlaces } from './margin-places';

interface Start {
	note: { id: string; number: string; epoch: string };
	person: { id: string; name: string };
	content: NoteContent;
	evaluation: Evaluation;
	threads: Thread[];
}

/** Where the cursor comes in when a cell is entered with the keyboard. */
export type Edge = 'start' | 'end';

/** The open sheet: its working copy and threads, and what is being done to them on this page. */
export class Sheet {
	readonly number: string;
	readonly copy: WorkingCopy;
	readonly threads: Threads;
	readonly drag: CellDrag;
	readonly margin = new MarginPlaces();
	/** The worked line that is open. */
	readonly line: OpenLine;
	/** Loaded when a line is opened first. */
	LineDetail = $state.raw<typeof LineDetailType>();
	/** Cell whose thread form is open. */
	composing = $state<string>();
	/** Cell below which a divider is searched for; null on an empty sheet. */
	finding = $state<string | null>();
	readonly #doors = new Map<string, (edge: Edge) => void>();

	constructor({ note, person, content, evaluation, threads }: Start) {
		this.number = note.number;
		this.copy = new WorkingCopy({
			noteId: note.id,
			number: note.number,
			epoch: note.epoch,
			person: { id: person.id, name: person.name },
			content,
			evaluation,
		});
		this.drag = new CellDrag(this.copy);
		this.threads = new Threads(note.number, threads);
		this.line = new OpenLine(note.number);
	}

	/** Announces how a cell takes the focus; call what it returns when the cell goes. */
	addDoor(cellId: string, enter: (edge: Edge) => void): () => void {
		this.#doors.set(cellId, enter);
		return () => this.#doors.delete(cellId);
	}

	/** Puts the focus into a cell. */
	enter(cellId: string, edge: Edge = 'end'): void {
		this.#doors.get(cellId)?.(edge);
	}

	/** Moves the focus from a cell to the one before or behind it, if there is one. */
	leave(cellId: string, direction: -1 | 1): boolean {
		const { cells } = this.copy;
		const next = cells[cells.findIndex((cell) => cell.id === cellId) + direction];
		if (!next) return false;
		this.enter(next.id, direction > 0 ? 'start' : 'end');
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
