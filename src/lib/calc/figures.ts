import { parseUnit } from './language/parse-line';
import { canonical } from './language/characters';
import { builtInNames } from './language/names';
import type { Note } from './note';
import type { Cell, Fault, Figure, SourceCell } from './results';
import type { Worked } from './worked';
import { mendOf, Trouble } from './trouble';
import { spoken } from './types';
import { same } from './units/dimension';

const pattern = /\{\{([^{}\n]{0,200})\}\}/g;

/** Reads the `{{name}}` and `{{name: mV}}` of text cells. */
export function readFigures(
	cells: readonly Cell[],
	readable: ReadonlySet<string>,
	note: Note,
	worked: Worked,
): { figures: Figure[]; faults: Fault[] } {
	const figures: Figure[] = [];
	const faults: Fault[] = [];
	for (const cell of cells) {
		if (cell.kind !== 'text' || !readable.has(cell.id)) continue;
		for (const match of cell.source.matchAll(pattern)) {
			const from = match.index;
			const figure: Figure = { cell: cell.id, from, to: from + match[0].length };
			try {
				figure.readout = quote(match[1] ?? '', note, worked);
			} catch (error) {
				if (!(error instanceof Trouble)) throw error;
				faults.push(fault(cell, from + 2, error));
			}
			figures.push(figure);
		}
	}
	return { figures, faults };
}

/** The readout of what stands between the braces. Throws Trouble with columns counted from behind the braces. */
function quote(inner: string, note: Note, worked: Worked) {
	const [left = '', right] = inner.split(/:(.*)/s, 2);
	const typed = left.trim();
	const from = left.length - left.trimStart().length;
	const at = { from, to: Math.max(from + typed.length, from + 1) };
	const line = note.definition(canonical(typed));
	if (!line) throw unknownName(typed, at, note);
	const computed = note.computed.get(line);
	if (line.kind === 'function')
		throw new Trouble('value', at, `\`${typed}\` is a function; only a quantity can be quoted.`);
	if (!computed) throw note.waiting(typed, line, at);
	const remembered = note.remembered.get(line);
	if (right === undefined && remembered) return worked.readoutOf(line.defined?.typed, remembered);
	const unit = unitAt(right ?? '', left.length + 1);
	const { type } = computed;
	if (type.dimension && !same(type.dimension, unit.dimension))
		throw new Trouble(
			'dimension',
			{ from: left.length + 1, to: inner.length },
			`\`${typed}\` is in ${spoken(type)}, not in ${unit.label}.`,
		);
	const quoted = { ...computed, type: { ...type, unit, fixed: true, point: unit.offset !== 0 } };
	return worked.inUnit(quoted);
}

function unitAt(text: string, offset: number) {
	try {
		return parseUnit(text);
	} catch (error) {
		if (!(error instanceof Trouble)) throw error;
		const start = offset + (text.length - text.trimStart().length);
		const end = Math.max(start + 1, offset + text.trimEnd().length);
		throw new Trouble(
			error.code,
			{ from: start, to: end },
			error.code === 'unknownName' ? error.message : `\`${text.trim()}\` is not a unit.`,
			error.how,
		);
	}
}

function unknownName(typed: string, at: { from: number; to: number }, note: Note): Trouble {
	if (typed === '')
		return new Trouble('syntax', at, 'The name of a quantity is missing between the braces.');
	const near = note.suggestions.nearest(typed, []);
	const built = [...builtInNames()].includes(typed);
	return new Trouble(
		'unknownName',
		at,
		built ? `\`${typed}\` is not a quantity of this note.` : `\`${typed}\` is not defined.`,
		near === undefined ? {} : { mend: `Did you mean \`${near}\`?`, replacement: near },
	);
}

function fault(cell: SourceCell, start: number, { at, code, message, how }: Trouble): Fault {
	const before = cell.source.slice(0, start);
	const line = before.split('\n').length;
	const column = start - (before.lastIndexOf('\n') + 1);
	return {
		cell: cell.id,
		line,
		from: column + at.from,
		to: column + at.to,
		code,
		message,
		...mendOf(how, column),
	};
}
