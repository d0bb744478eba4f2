import { bounds } from './bounds';
import { sourceOf } from './cells';
import { givenLines, type Given } from './given-cells';
import { isRemembered, parseLine, unreadLine, type ParsedLine } from './language/parse-line';
import type { SharedDraw } from './doubt/shared-trials';
import type { Cell, Fault } from './results';
import { mendOf, Trouble } from './trouble';

/** How a process that watches the engine takes part: it learns where the engine is and names lines to leave out. */
export interface Watch {
	/** Called before each step with the line it is about. */
	at?(cell: string, line: number): void;
	skip?: readonly SkippedLine[];
	/** Told how many trials are drawn; answers false to stop them. */
	trials?: (drawn: number, total: number) => boolean;
	/** Has other threads take part in drawing trials of quantities; they begin when they can. */
	crew?: (names: readonly string[], draw: SharedDraw) => void;
}

/** A line that an earlier try could not finish. */
export interface SkippedLine {
	cell: string;
	line: number;
	code: 'tooLong' | 'tooLarge';
}

/** A line at its place in the note. */
export interface NoteLine extends ParsedLine {
	cell: string;
	/** 1-based number of the cell in the sheet, as its terminal shows it. */
	terminal: number;
	/** 1-based line of the cell. */
	line: number;
	text: string;
	requirement: boolean;
	/** What it stands for, where its cell holds no formulas. */
	given?: Given;
}

/** Reads calculation and requirement cells into lines. Faults say what was left out because it is too much. */
export function readLines(
	cells: readonly Cell[],
	watch: Watch,
): {
	lines: NoteLine[];
	readable: Set<string>;
	faults: Fault[];
} {
	const lines: NoteLine[] = [];
	const faults: Fault[] = [];
	const readable = new Set<string>();
	let length = 0;
	cells.forEach((cell, i) => {
		const source = sourceOf(cell);
		length += source.length;
		const rows = hasLines(cell) ? source.split('\n') : [];
		if (length > bounds.noteLength || lines.length + rows.length > bounds.lines) {
			const message =
				length > bounds.noteLength
					? `The note is longer than ${bounds.noteLength} characters; this cell is not computed.`
					: `The note has more than ${bounds.lines} lines; this cell is not computed.`;
			const mend = 'Split the note in two.';
			faults.push({
				cell: cell.id,
				line: 1,
				from: 0,
				to: rows[0]?.length ?? 0,
				code: 'tooLarge',
				message,
				mend,
			});
			return;
		}
		readable.add(cell.id);
		if (!('source' in cell)) lines.push(...givenLines(cell, i + 1));
		rows.forEach((text, row) => {
			const place = { cell: cell.id, terminal: i + 1, line: row + 1, text };
			if (!isRemembered(text)) watch.at?.(cell.id, row + 1);
			const skipped = watch.skip?.find(({ cell: id, line }) => id === cell.id && line === row + 1);
			const parsed = skipped ? unreadLine(text, unfinished(skipped, text)) : parseLine(text);
			lines.push({ ...parsed, ...place, requirement: cell.kind === 'requirement' });
		});
	});
	return { lines, readable, faults };
}

function hasLines(cell: Cell): boolean {
	return cell.kind === 'calculation' || cell.kind === 'requirement';
}

/** How a sentence points at a line: "cell 2, line 3". */
export function whereabouts(line: NoteLine): string {
	return `cell ${line.terminal}, line ${line.line}`;
}

function unfinished({ code }: SkippedLine, text: string): Trouble {
	const message =
		code === 'tooLong'
			? 'This line took too long to compute and was stopped.'
			: 'This line took too much memory and was stopped.';
	return new Trouble(code, { from: 0, to: text.length }, message, {
		mend: 'Work on fewer values, or split it into several quantities.',
	});
}

/** A fault at its place in the note. */
export function faultOf(
	{ cell, line, text }: Pick<NoteLine, 'cell' | 'line' | 'text'>,
	{ code, at, message, how }: Trouble,
): Fault {
	const { length } = text;
	const from = Math.min(at.from, Math.max(0, length - 1));
	return {
		cell,
		line,
		from,
		to: Math.max(from, Math.min(at.to, length)),
		code,
		message,
		...mendOf(how),
	};
}
