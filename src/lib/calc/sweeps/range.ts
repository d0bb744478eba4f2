import { parseLine } from '../language/parse-line';
import { misusedNames } from '../misused-names';
import type { Note } from '../note';
import type { NoteLine } from '../note-lines';
import { unitOf } from '../show';
import { Trouble } from '../trouble';
import { differ, isPure, spoken, type Type } from '../types';
import { fromSI } from '../units/unit';
import type { SweepLine } from './sweep-line';

/** The values of a range in the unit of the quantity that takes them, ascending. Throws Trouble. */
export function rangeOf(line: SweepLine, type: Type, note: Note): number[] {
	const [from, to] = [line.from, line.to].map((end) => valueOf(end, line, type, note)) as [
		number,
		number,
	];
	const at = { from: line.from.from, to: line.to.to };
	if (!(to > from))
		throw new Trouble('value', at, 'The range ends where it begins, or before.', {
			mend: `Write \`from ${line.to.text} to ${line.from.text}\`, or give it another end.`,
		});
	if (line.logarithmic && (!(from > 0) || type.point))
		throw new Trouble(
			'value',
			line.from,
			type.point
				? 'A temperature on a scale has a zero of its own and no logarithmic steps.'
				: 'Logarithmic steps begin above zero.',
			{ mend: 'Give it another beginning, or leave out `logarithmic`.' },
		);
	const steps = line.points - 1;
	return Array.from({ length: line.points }, (_, i) => {
		if (i === 0) return from;
		if (i === steps) return to;
		const x = line.logarithmic
			? from * (to / from) ** (i / steps)
			: from + ((to - from) * i) / steps;
		// What binary fractions add behind the fourteenth digit is of no use on an axis or in a table.
		return Number(x.toPrecision(14));
	});
}

function valueOf(
	{ text, from }: SweepLine['from'],
	{ over }: SweepLine,
	wanted: Type,
	note: Note,
): number {
	// Spaces in front keep the columns those of the line.
	const parsed = parseLine(' '.repeat(from) + text);
	const at = { from, to: from + text.length };
	if (parsed.trouble) throw parsed.trouble;
	if (!parsed.body || parsed.kind !== 'expression')
		throw new Trouble('syntax', at, `\`${text}\` is no value.`);
	const { definition, waiting, suggestions } = {
		definition: (name: string) => note.definition(name),
		waiting: (reference: { typed: string; from: number; to: number }, used: NoteLine) =>
			used.kind === 'function' || note.computed.has(used)
				? undefined
				: note.waiting(reference.typed, used, reference),
		suggestions: note.suggestions,
	};
	const place = { cell: '', terminal: 0, line: 1, text: ' '.repeat(from) + text };
	const [misused] = misusedNames(
		{ ...parsed, ...place, requirement: false },
		{ definition, waiting, suggestions },
	);
	if (misused) throw misused;
	const { value, type } = measured(note, parsed.body, at);
	if (differ(wanted, type) || Boolean(wanted.point) !== Boolean(type.point)) {
		const unit = unitOf(wanted);
		const bare = parsed.body.kind === 'number' && isPure(type) && !isPure(wanted);
		throw new Trouble(
			'dimension',
			at,
			`\`${over.typed}\` is ${said(wanted)}, but \`${text}\` is ${said(type)}.`,
			{
				mend: `Give it in ${unit.label || 'a pure number'}.`,
				...(bare && { replacement: `${text} ${unit.text}` }),
			},
		);
	}
	return fromSI(value, unitOf(wanted));
}

function said(type: Type): string {
	return type.point || isPure(type) ? spoken(type) : `in ${spoken(type)}`;
}

function measured(
	note: Note,
	body: Parameters<Note['measure']>[0],
	at: { from: number; to: number },
) {
	try {
		return note.measure(body);
	} catch (error) {
		if (error instanceof Trouble && error.code === 'notComparable')
			throw new Trouble('value', at, 'A range goes from one number to another.');
		throw error;
	}
}
