import type { Evaluation, Quantity } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';

/** What is compared of a side. */
export interface Material {
	content: NoteContent;
	results: Evaluation;
}

/** A line that defines a name. */
export interface Definition {
	name: string;
	cell: string;
	line: number;
	isFunction: boolean;
	/** The line without its comment. */
	code: string;
	/** What stands behind the name. */
	formula: string;
	/** Absent for a function and for a line with an error. */
	quantity: Quantity | undefined;
}

/** The definitions of a note by their names, in the order of the sheet. Where a name is defined twice, the first counts. */
export function definitionsOf({ content, results }: Material): Map<string, Definition> {
	const sources = linesOf(content);
	const order = new Map(content.cells.map(({ id }, index) => [id, index]));
	const found = new Map<string, Definition>();
	const lines = [...results.lines].sort(
		(a, b) => (order.get(a.cell) ?? 0) - (order.get(b.cell) ?? 0) || a.line - b.line,
	);
	for (const { cell, line, kind, name } of lines) {
		if (name === undefined || found.has(name)) continue;
		const code = codeOf(sources.get(cell)?.[line - 1] ?? '');
		found.set(name, {
			name,
			cell,
			line,
			isFunction: kind === 'function',
			code,
			formula: code.slice(code.indexOf('=') + 1).trim(),
			quantity: Object.hasOwn(results.quantities, name) ? results.quantities[name] : undefined,
		});
	}
	return found;
}

/** The lines of each cell's source. */
export function linesOf(content: NoteContent): Map<string, string[]> {
	return new Map(content.cells.map(({ id, source }) => [id, source.split('\n')]));
}

/** A line without the comment behind it. */
export function codeOf(line: string): string {
	return line.replace(/#.*$/s, '').trim();
}

const tokens = /[\p{L}\p{M}_°%][\p{L}\p{M}\p{N}_]*|(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?|\S/gu;

/** A formula in one spelling: what stands between its signs does not count, and names are those of the later side. */
export function spelled(code: string, renamed?: ReadonlyMap<string, string>): string {
	return (code.match(tokens) ?? []).map((token) => renamed?.get(token) ?? token).join(' ');
}

/** Every name that a line of the note has or speaks of, and the other signs of its formulas. */
export function spokenIn({ cells }: NoteContent): Set<string> {
	const lines = cells
		.filter(({ kind }) => kind !== 'text')
		.flatMap(({ source }) => source.split('\n'));
	return new Set(lines.flatMap((line) => codeOf(line).match(tokens) ?? []));
}
