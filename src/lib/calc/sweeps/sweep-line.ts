import { bounds } from '../bounds';
import { canonical } from '../language/characters';
import type { Place } from '../language/nodes';
import { Trouble } from '../trouble';

/** A name as it is typed in the line of a curve. */
export interface SweepName extends Place {
	name: string;
	typed: string;
}

/** What the line of a curve says, apart from the note it stands in. */
export interface SweepLine {
	/** What is drawn. */
	quantities: readonly SweepName[];
	/** What takes the values of the range. */
	over: SweepName;
	/** Both ends of the range, as formulas. */
	from: Place & { text: string };
	to: Place & { text: string };
	points: number;
	logarithmic: boolean;
	description?: string;
}

/** Points where nothing is said: a hundred steps. */
const usualPoints = 101;
const example = 'Vadc over Vmax from 0 V to 40 V';

/** Reads `Vadc, Vref over Vmax from 0 V to 40 V in 201 points logarithmic # comment`. Throws Trouble. */
export function readSweep(text: string): SweepLine {
	if (text.length > bounds.lineLength)
		throw new Trouble(
			'tooLarge',
			{ from: 0, to: text.length },
			`The line has ${text.length} characters; ${bounds.lineLength} are possible.`,
		);
	const comment = text.indexOf('#');
	const code = comment < 0 ? text : text.slice(0, comment);
	const description = comment < 0 ? '' : text.slice(comment + 1).trim();
	const over = wordAt(code, 'over', 0);
	if (!over)
		throw new Trouble('syntax', whole(code), 'A curve is a quantity over another one.', {
			mend: `Write it as \`${example}\`.`,
		});
	const start = wordAt(code, 'from', over.to);
	if (!start) throw withoutRange(code, over.to);
	const stop = wordAt(code, 'to', start.to);
	if (!stop)
		throw new Trouble('syntax', piece(code, start.from, code.length), 'The range has no end.', {
			mend: 'Write `from 0 V to 40 V`, say.',
		});
	const { end, points, logarithmic } = readTail(code, stop.to);
	return {
		quantities: readNames(code, over.from),
		over: readName(code, over.to, start.from, 'over'),
		from: readEnd(code, start.to, stop.from, 'from'),
		to: readEnd(code, stop.to, end, 'to'),
		points,
		logarithmic,
		...(description !== '' && { description }),
	};
}

function wordAt(code: string, word: string, from: number): Place | undefined {
	const pattern = new RegExp(`(?<![\\p{L}\\p{N}_])${word}(?![\\p{L}\\p{N}_])`, 'u');
	const at = code.slice(from).search(pattern);
	return at < 0 ? undefined : { from: from + at, to: from + at + word.length };
}

/** A stretch of the line without the spaces around it. */
function piece(code: string, from: number, to: number): Place & { text: string } {
	const raw = code.slice(from, to);
	const text = raw.trim();
	const start = from + (text === '' ? 0 : raw.length - raw.trimStart().length);
	return { text, from: start, to: start + text.length };
}

function whole(code: string): Place {
	const { from, to } = piece(code, 0, code.length);
	return { from, to };
}

function withoutRange(code: string, from: number): Trouble {
	const named = piece(code, from, code.length);
	const at = named.text === '' ? { from: from - 4, to: from } : named;
	return new Trouble('syntax', at, 'The range is missing.', {
		mend: `Write it behind the name, as in \`${example}\`.`,
	});
}

function readNames(code: string, to: number): SweepName[] {
	const names: SweepName[] = [];
	let from = 0;
	for (const part of code.slice(0, to).split(',')) {
		names.push(readName(code, from, from + part.length, names.length > 0 ? ',' : ''));
		from += part.length + 1;
	}
	if (names.length > bounds.sweepQuantities)
		throw new Trouble(
			'tooLarge',
			{ from: names[0]?.from ?? 0, to: names.at(-1)?.to ?? 0 },
			`One picture takes ${bounds.sweepQuantities} quantities at most.`,
			{ mend: 'Put the others into a curve cell of their own.' },
		);
	return names;
}

const pattern = /^[\p{L}_$][\p{L}\d_$]*$/u;

function readName(code: string, from: number, to: number, behind: string): SweepName {
	const { text, ...at } = piece(code, from, to);
	if (text === '')
		throw new Trouble(
			'syntax',
			{ from: Math.max(0, from - behind.length), to: Math.max(1, from) },
			behind === ''
				? 'The quantity is missing in front of `over`.'
				: `The name of a quantity is missing behind \`${behind}\`.`,
			{ mend: `Write it as \`${example}\`.` },
		);
	if (!pattern.test(text))
		throw new Trouble('syntax', at, `\`${text}\` is not the name of a quantity.`, {
			mend: 'Define it in a calculation and draw it by its name.',
		});
	return { name: canonical(text), typed: text, ...at };
}

function readEnd(code: string, from: number, to: number, behind: string): Place & { text: string } {
	const end = piece(code, from, to);
	if (end.text !== '') return end;
	throw new Trouble(
		'syntax',
		{ from: from - behind.length, to: from },
		`A value is missing behind \`${behind}\`.`,
		{ mend: 'Write `from 0 V to 40 V`, say.' },
	);
}

/** What may stand behind the range, in either order. */
function readTail(
	code: string,
	from: number,
): { end: number; points: number; logarithmic: boolean } {
	let end = code.trimEnd().length;
	let points: number | undefined;
	let logarithmic = false;
	for (;;) {
		const rest = code.slice(from, end);
		const spaced = /\s+logarithmic$/.exec(rest);
		const counted = /\s+in\s+(\S+)\s+points$/.exec(rest);
		if (spaced && !logarithmic) logarithmic = true;
		else if (counted && points === undefined)
			points = countOf(counted[1] ?? '', code.indexOf(counted[1] ?? '', from + counted.index));
		else return { end, points: points ?? usualPoints, logarithmic };
		end = from + (spaced ?? counted)!.index;
	}
}

function countOf(text: string, from: number): number {
	const at = { from, to: from + text.length };
	const count = Number(text);
	const most = bounds.sweepPoints;
	if (!/^\d+$/.test(text) || count < 2)
		throw new Trouble('value', at, 'The number of points is a whole number of at least 2.', {
			mend: `Write \`in ${usualPoints} points\`, or leave it out.`,
		});
	if (count > most)
		throw new Trouble('tooLarge', at, `A curve has ${most} points at most.`, {
			replacement: String(most),
		});
	return count;
}
