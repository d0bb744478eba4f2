import { Facet } from '@codemirror/state';
import type { Evaluation } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';

/** A piece of a cell's source. */
export interface Place {
	cellId: string;
	from: number;
	to: number;
}

/** The note around a cell, as its editor needs it. */
export interface NoteContext {
	readonly cells: readonly NoteCell[];
	readonly evaluation: Evaluation;
	/** Puts the cursor onto a place of the note. */
	go(place: Place): void;
	/** Gives a quantity another name everywhere; without one the person is asked for it. */
	rename(name: string, next?: string): void;
}

/** The note that an editor's cell belongs to. */
export const noteContext = Facet.define<NoteContext, NoteContext | undefined>({
	combine: ([context]) => context,
});
