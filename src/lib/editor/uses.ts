import { canonical } from '$lib/calc/language/characters';
import { figurePattern } from '$lib/components/figures';
import { splitLine, tokenize } from '$lib/components/lines';
import type { NoteCell } from '$lib/note/document';
import type { Place } from './note-context';

/** A word of a line that is a name, a called name or a unit. Columns are those of the line. */
export interface Word {
	text: string;
	kind: 'name' | 'call' | 'unit';
	from: number;
	to: number;
}

/** The words of a formula line, without those of its comment. */
export function wordsOf(line: string): Word[] {
	const { nameFrom, nameTo, formulaFrom, name } = splitLine(line);
	const words: Word[] = [];
	if (name !== undefined) words.push({ text: name, kind: 'name', from: nameFrom, to: nameTo });
	const start = name === undefined ? 0 : nameTo;
	let from = start;
	for (const { kind, text } of tokenize(line.slice(start))) {
		const to = from + text.length;
		if (kind === 'name' || kind === 'call' || (kind === 'unit' && from >= formulaFrom))
			words.push({ text, kind, from, to });
		from = to;
	}
	return words;
}

/** Where the name of a quoted figure stands, `{{name: unit}}`. */
export function quotedNames(source: string): { name: string; from: number; to: number }[] {
	return [...source.matchAll(new RegExp(figurePattern.source, 'g'))].map((match) => {
		const inner = (match[1] ?? '').split(':', 1)[0] ?? '';
		const name = inner.trim();
		const from = match.index + 2 + inner.length - inner.trimStart().length;
		return { name, from, to: from + name.length };
	});
}

/** Values of a function that a line defines: within the line they hide the note's quantities. */
export function parametersOf(line: string): string[] {
	const { kind, nameTo, formulaFrom } = splitLine(line);
	if (kind !== 'function') return [];
	return tokenize(line.slice(nameTo, formulaFrom))
		.filter((token) => token.kind === 'name')
		.map(({ text }) => canonical(text));
}

/**
 * Every place where the note defines, uses or quotes a quantity or function of its own, in sheet order. A word behind a
 * number counts where it is no unit: `2 R1` is a product.
 */
export function usesOf(
	cells: readonly NoteCell[],
	name: string,
	isUnit: (typed: string) => boolean,
): Place[] {
	const wanted = canonical(name);
	return cells.flatMap((cell) => {
		const at = (from: number, to: number): Place => ({ cellId: cell.id, from, to });
		if (cell.kind === 'text')
			return quotedNames(cell.source)
				.filter((quoted) => canonical(quoted.name) === wanted)
				.map(({ from, to }) => at(from, to));
		let start = 0;
		const places: Place[] = [];
		for (const line of cell.source.split('\n')) {
			for (const word of wordsIn(line, wanted, isUnit))
				places.push(at(start + word.from, start + word.to));
			start += line.length + 1;
		}
		return places;
	});
}

function wordsIn(line: string, wanted: string, isUnit: (typed: string) => boolean): Word[] {
	const words = wordsOf(line).filter(
		({ kind, text }) => canonical(text) === wanted && !(kind === 'unit' && isUnit(text)),
	);
	if (words.length === 0 || !parametersOf(line).includes(wanted)) return words;
	const { nameFrom } = splitLine(line);
	return words.filter((word) => word.from === nameFrom);
}

/** The line that defines a name. */
export interface Definition extends Place {
	/** 1-based number of the cell in the sheet. */
	terminal: number;
	/** 1-based. */
	line: number;
	text: string;
}

/** Where a name is defined; the first place where there are several. */
export function definitionOf(cells: readonly NoteCell[], name: string): Definition | undefined {
	const wanted = canonical(name);
	for (const [index, cell] of cells.entries()) {
		if (cell.kind !== 'calculation') continue;
		let start = 0;
		for (const [row, text] of cell.source.split('\n').entries()) {
			const parts = splitLine(text);
			if (parts.name !== undefined && canonical(parts.name) === wanted)
				return {
					cellId: cell.id,
					from: start + parts.nameFrom,
					to: start + parts.nameTo,
					terminal: index + 1,
					line: row + 1,
					text,
				};
			start += text.length + 1;
		}
	}
	return undefined;
}
