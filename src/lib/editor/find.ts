import type { NoteCell } from '$lib/note/document';
import type { Place } from './note-context';

export interface Question {
	text: string;
	/** `r1` is not `R1`. */
	matchCase: boolean;
	/** `R1` is not found in `R12`. */
	wholeName: boolean;
}

/** Most places that are looked for; a note in which one letter is sought has no end of them. */
export const mostPlaces = 5_000;

/** Every place of a text in the note's cells, in sheet order. */
export function find(cells: readonly NoteCell[], question: Question): Place[] {
	const pattern = patternOf(question);
	const places: Place[] = [];
	if (!pattern) return places;
	for (const cell of cells) {
		for (const match of cell.source.matchAll(pattern)) {
			if (places.length === mostPlaces) return places;
			places.push({ cellId: cell.id, from: match.index, to: match.index + match[0].length });
		}
	}
	return places;
}

function patternOf({ text, matchCase, wholeName }: Question): RegExp | undefined {
	if (text === '') return undefined;
	const plain = text.replace(/[\\^$.*+?()[\]{}|/]/g, '\\$&');
	const bounded = wholeName ? `(?<![\\p{L}\\p{N}_])${plain}(?![\\p{L}\\p{N}_])` : plain;
	return new RegExp(bounded, matchCase ? 'gu' : 'giu');
}
