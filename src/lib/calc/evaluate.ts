import { engineVersion } from './engine';
import { readFigures } from './figures';
import { Note } from './note';
import { readLines, type NoteLine, type Watch } from './note-lines';
import { judge } from './requirements';
import type { Cell, Evaluation, Fault, Options, Quantity, Readout, WorkedLine } from './results';
import { figures, show } from './show';
import type { Trouble } from './trouble';

export { defaultOptions, engineVersion } from './engine';

/**
 * Computes a note. Pure: the same cells and options give the same results, and no input makes it throw. `watch` is
 * for the process around it that must be able to end it.
 */
export function evaluate(cells: readonly Cell[], options: Options, watch: Watch = {}): Evaluation {
	const { lines, readable, faults } = readLines(cells, watch);
	const note = new Note(lines, watch);
	const readouts = new Map(
		[...note.computed].map(([line, { value, type }]) => [line, show(value, type)]),
	);
	const requirements = lines.flatMap((line) => judge(line, note, options) ?? []);
	const quoted = readFigures(cells, readable, note);
	const errors = [
		...faults,
		...lines.flatMap((line) => note.faultsOf(line).map((trouble) => fault(line, trouble))),
		...quoted.faults,
	];
	return {
		engine: engineVersion,
		quantities: quantities(note, readouts),
		lines: lines.filter((line) => !line.requirement).map((line) => workedLine(line, readouts)),
		requirements,
		figures: quoted.figures,
		errors: inSheetOrder(errors, cells),
	};
}

type Readouts = ReadonlyMap<NoteLine, Readout>;

function quantities(note: Note, readouts: Readouts): Record<string, Quantity> {
	const all: Record<string, Quantity> = {};
	for (const line of note.lines) {
		const computed = note.computed.get(line);
		const readout = readouts.get(line);
		if (!line.defined || line.kind !== 'definition' || !computed || !readout) continue;
		all[line.defined.typed] = {
			cell: line.cell,
			line: line.line,
			...figures(computed.value, computed.type),
			text: readout.text,
			readout,
			...(line.description !== undefined && { description: line.description }),
			dependsOn: line.references.map(
				({ name, typed }) => note.definition(name)?.defined?.typed ?? typed,
			),
		};
	}
	return all;
}

function workedLine(line: NoteLine, readouts: Readouts): WorkedLine {
	const readout = readouts.get(line);
	return {
		cell: line.cell,
		line: line.line,
		kind: line.kind,
		...(line.defined && { name: line.defined.typed }),
		...(readout && { readout }),
	};
}

function fault(line: NoteLine, { code, at, message, how }: Trouble): Fault {
	const length = line.text.length;
	const from = Math.min(at.from, Math.max(0, length - 1));
	return {
		cell: line.cell,
		line: line.line,
		from,
		to: Math.max(from, Math.min(at.to, length)),
		code,
		message,
		...(how.mend !== undefined && { mend: how.mend }),
		...(how.replacement !== undefined && { replacement: how.replacement }),
	};
}

function inSheetOrder(errors: Fault[], cells: readonly Cell[]): Fault[] {
	const place = new Map(cells.map((cell, i) => [cell.id, i]));
	return errors.sort(
		(a, b) =>
			(place.get(a.cell) ?? 0) - (place.get(b.cell) ?? 0) || a.line - b.line || a.from - b.from,
	);
}
