import type { Evaluation, Readout } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';

/** Text between the braces of `{{name}}` or `{{name: unit}}`; sticky, so that a parser can ask at one place. */
export const figurePattern = /\{\{([^{}\n]+)\}\}/y;

/** Finds what a quoted figure shows; undefined where it has no value. Takes the whole `{{…}}`. */
export type FindReadout = (quoted: string) => Readout | undefined;

/**
 * Figures of a text cell by the words they are quoted with. Results may be a moment older than the text, so places
 * that no longer hold a quotation are passed over, and a plain `{{name}}` falls back on the register.
 */
export function figuresOf(cell: NoteCell, evaluation: Evaluation): FindReadout {
	const found = new Map<string, Readout>();
	for (const figure of evaluation.figures) {
		if (figure.cell !== cell.id || !figure.readout) continue;
		const quoted = cell.source.slice(figure.from, figure.to);
		if (quoted.startsWith('{{') && quoted.endsWith('}}')) found.set(quoted, figure.readout);
	}
	return (quoted) => {
		const name = quoted.slice(2, -2).trim();
		const listed = Object.hasOwn(evaluation.quantities, name)
			? evaluation.quantities[name]
			: undefined;
		return found.get(quoted) ?? listed?.readout;
	};
}

/** Name of the quantity that `{{name: unit}}` quotes. */
export function quotedName(quoted: string): string {
	return quoted.slice(2, -2).split(':', 1)[0]?.trim() ?? '';
}
