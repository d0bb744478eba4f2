import { defaultOptions } from '$lib/calc/engine';
import type { Options } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';

/** The options that a note is computed with: the usual ones, and how its readouts are set where somebody chose that. */
export function optionsOf({ shown }: Pick<NoteContent, 'shown'>): Options {
	return shown ? { ...defaultOptions, shown } : defaultOptions;
}
