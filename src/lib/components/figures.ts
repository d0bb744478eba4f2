import type { Evaluation, Figure, Readout } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';

/** Text between the braces of `{{name}}` or `{{name: unit}}`; sticky, so that a parser can ask at one place. */
export const figurePattern = /\{\{([^{}\n]+)\}\}/y;

/** Finds what a quoted figure shows; undefined where it has no value. Takes the whole `{{…}}`. */
export type FindReadout = (quoted: string) => Shown | undefined;

/** A quoted figure, and what a trial makes of it where that moves it. */
interface Shown extends Readout {
	tried?: Readout;
}

/**
 * Figures of a text cell by the words they are quoted with. Results may be a moment older than the text, so places
 * that no longer hold a quotation are passed over, and a plain `{{name}}` falls back on the register. `tried` are the
 * figures that a trial moves.
 */
export function figuresOf(
	cell: NoteCell,
	evaluation: Evaluation,
	tried: readonly Figure[] = [],
): FindReadout {
	const found = quotedIn(cell, evaluation.figures);
	const moved = quotedIn(cell, tried);
	return (quoted) => {
		const name = quoted.slice(2, -2).trim();
		const listed = Object.hasOwn(evaluation.quantities, name)
			? evaluation.quantities[name]
			: undefined;
		const readout = found.get(quoted) ?? listed?.readout;
		const other = moved.get(quoted);
		return readout && other ? { ...readout, tried: other } : readout;
	};
}

function quotedIn(cell: NoteCell, figures: readonly Figure[]): Map<string, Readout> {
	const found = new Map<string, Readout>();
	for (const figure of figures) {
		if (figure.cell !== cell.id || !figure.readout) continue;
		const quoted = cell.source.slice(figure.from, figure.to);
		if (quoted.startsWith('{{') && quoted.endsWith('}}')) found.set(quoted, figure.readout);
	}
	return found;
}

/** All figures that a text quotes, in one string: while it stays the same, so does the text as it is set. */
export function shownIn(source: string, find: FindReadout): string {
	if (!source.includes('{{')) return '';
	return Array.from(source.matchAll(new RegExp(figurePattern.source, 'g')), ([quoted]) => {
		const readout = find(quoted);
		return readout ? JSON.stringify(readout) : '';
	}).join('\n');
}

/** Name of the quantity that `{{name: unit}}` quotes. */
export function quotedName(quoted: string): string {
	return quoted.slice(2, -2).split(':', 1)[0]?.trim() ?? '';
}
