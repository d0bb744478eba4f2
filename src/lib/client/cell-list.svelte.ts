import { cellsOf, placedCells, type CellKind, type NoteCell } from '$lib/note/document';
import * as Y from 'yjs';

/** A cell whose source follows the document. */
export class LiveCell implements NoteCell {
	readonly id: string;
	readonly kind: CellKind;
	/** Absent until the document is complete. */
	text: Y.Text | undefined;
	#source = $state('');

	constructor({ id, kind, source }: NoteCell) {
		this.id = id;
		this.kind = kind;
		this.#source = source;
	}

	get source(): string {
		return this.#source;
	}

	/** Takes the text's present state over. */
	refresh(): void {
		this.#source = this.text?.toJSON() ?? this.#source;
	}
}

/**
 * A document's cells in sheet order. An entry stays the same object while its cell does: typing changes its
 * source, not the list.
 */
export class CellList {
	readonly #doc: Y.Doc;
	#list = $state.raw<readonly LiveCell[]>([]);

	constructor(doc: Y.Doc, first: readonly NoteCell[]) {
		this.#doc = doc;
		this.#list = first.map((cell) => new LiveCell(cell));
	}

	get list(): readonly LiveCell[] {
		return this.#list;
	}

	/** From now on the document is what is shown, not the cells given at first. */
	follow(): void {
		this.#rebuild();
		cellsOf(this.#doc).observeDeep((events) => {
			if (events.some((event) => !(event.target instanceof Y.Text))) this.#rebuild();
			for (const cell of this.#list) {
				if (events.some(({ target }) => target === cell.text)) cell.refresh();
			}
		});
	}

	textOf(id: string): Y.Text | undefined {
		return this.#list.find((cell) => cell.id === id)?.text;
	}

	#rebuild(): void {
		const next = placedCells(this.#doc).map((placed) => {
			const known = this.#list.find(({ id }) => id === placed.id);
			// An undone deletion brings a new text under the old id; editors are bound to the text.
			const same = known?.kind === placed.kind && (!known.text || known.text === placed.text);
			const cell = same ? known : new LiveCell(placed);
			cell.text = placed.text;
			cell.refresh();
			return cell;
		});
		const changed =
			next.length !== this.#list.length || next.some((cell, index) => cell !== this.#list[index]);
		if (changed) this.#list = next;
	}
}
