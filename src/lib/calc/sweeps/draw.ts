import { bounds } from '../bounds';
import type { Note } from '../note';
import type { NoteLine } from '../note-lines';
import { judge } from '../requirements';
import type { AxisUnit, Options, Sweep, SweepSeries } from '../results';
import { show, unitOf } from '../show';
import { Trouble } from '../trouble';
import { differ, spoken, type Type } from '../types';
import { shown } from '../uncertainty';
import { unknownName } from '../unknown-names';
import { axisUnit, readout } from '../units/display';
import { fromSI, toSI } from '../units/unit';
import { neededLines, reached } from './needed-lines';
import { rangeOf } from './range';
import { Sampler, type PointValue, type Sample } from './sampler';
import { limitAlong, requirementsOn } from './sweep-limits';
import { readSweep, type SweepLine, type SweepName } from './sweep-line';
import { sweptInput, type SweptInput } from './swept-input';

/** A line of a curve cell at its place. */
export interface SweepPlace {
	cell: string;
	line: number;
	text: string;
}

/** Operations that curves may still take. */
export interface Left {
	steps: number;
}

/** What a curve cell asks for, found in the note before anything is computed. */
export interface Plan {
	said: SweepLine;
	input: SweptInput;
	quantities: readonly Drawn[];
	limited: readonly { name: string; requirement: NoteLine }[];
	/** Values of the input, in its unit. */
	x: readonly number[];
	/** All lines that the picture is computed from. */
	lines: readonly NoteLine[];
}

/** Reads a line of a curve cell. Throws Trouble. */
export function planOf(text: string, note: Note): Plan {
	const said = readSweep(text);
	const over = definitionOf(said.over, note);
	const quantities = quantitiesOf(said, note);
	for (const [i, { line }] of quantities.entries())
		if (line === over || !reached([line], note).has(over))
			throw independent(said.quantities[i]!, said.over);
	const input = sweptInput(said.over, over, note);
	const limited = quantities.flatMap(({ name }) =>
		requirementsOn(name, note).map((requirement) => ({ name, requirement })),
	);
	const wanted = [
		input.line,
		...quantities.map(({ line }) => line),
		...limited.map(({ requirement }) => requirement),
	];
	const x = rangeOf(said, input.type, note);
	return { said, input, quantities, limited, x, lines: neededLines(wanted, note) };
}

/** Computes what a curve cell draws. Throws Trouble. */
export function drawSweep(
	place: SweepPlace,
	plan: Plan,
	note: Note,
	options: Options,
	left: Left,
): Sweep {
	const { said, input, quantities, limited, x, lines } = plan;
	const sampler = new Sampler({
		input,
		quantities: quantities.map(({ line }) => line),
		requirements: limited.map(({ requirement }) => requirement),
		lines,
		options,
	});
	const sampleAt = (value: number, worst = false): Sample => {
		const before = sampler.spent;
		const sample = sampler.at(value, worst);
		left.steps -= sampler.spent - before;
		if (left.steps < 0) throw tooMuch(place.text);
		return sample;
	};
	const before = left.steps;
	const samples = x.map((value, i) => {
		// One point costs as much as the other: what cannot be finished is not begun.
		if (i === 1 && (before - left.steps) * x.length > before) throw tooMuch(place.text);
		return sampleAt(value, true);
	});
	const unit = unitOf(input.type);
	const read = (value: number) => readout(toSI(value, unit), unit, !input.type.fixed, 5).text;
	const remarks = missing(samples, x, read, said.over);
	const series = quantities.map((one, i) =>
		seriesOf(
			one,
			samples.map(({ values }) => values[i]),
			note,
			options,
		),
	);
	const type = quantities[0]!.type;
	const values = series.flatMap((one) => one.values.map((value) => value ?? 0));
	return {
		cell: place.cell,
		line: place.line,
		...(said.description !== undefined && { description: said.description }),
		over: {
			name: input.line.defined?.typed ?? said.over.typed,
			unit: unit.text,
			shown: axisOf(said.logarithmic ? [Math.sqrt(x[0]! * x.at(-1)!)] : x, input.type),
			present: fromSI(input.present, unit),
			presentText: show(input.present, input.type).text,
			...(note.computed.get(input.line)?.doubt && { inDoubt: true as const }),
		},
		logarithmic: said.logarithmic,
		x: [...x],
		unit: unitOf(type).text,
		shown: axisOf(values, type),
		series,
		limits: limited.map(({ name, requirement }, i) =>
			limitAlong(requirement, name, {
				x,
				judged: samples.map((sample) => sample.judged[i]),
				at: (value) => sampleAt(value).judged[i],
				present: judge(requirement, note, options),
				read,
			}),
		),
		...(remarks.length > 0 && { remarks }),
	};
}

/** How the numbers of an axis are shown, whose largest one chooses the prefix. */
function axisOf(values: readonly number[], type: Type): AxisUnit {
	const unit = unitOf(type);
	const largest = Math.max(...values.map((value) => Math.abs(value)));
	return axisUnit(toSI(largest, unit), unit, !type.fixed);
}

function definitionOf(at: SweepName, note: Note): NoteLine {
	const line = note.definition(at.name);
	if (!line) {
		const reference = { ...at, called: false };
		const place = { text: '', parameters: [] } as unknown as NoteLine;
		throw unknownName(reference, place, note.suggestions);
	}
	if (line.kind === 'function')
		throw new Trouble('value', at, `\`${at.typed}\` is a function; a curve draws quantities.`, {
			mend: `Define a quantity with it, \`y = ${at.typed}(x)\`, and draw that.`,
		});
	return line;
}

/** A quantity that is drawn. */
interface Drawn {
	name: string;
	line: NoteLine;
	type: Type;
}

function quantitiesOf({ quantities }: SweepLine, note: Note): Drawn[] {
	const drawn = quantities.map((at, i): Drawn & { at: SweepName } => {
		const line = definitionOf(at, note);
		const computed = note.computed.get(line);
		if (!computed) throw note.waiting(at.typed, line, at);
		if (typeof computed.value !== 'number' || computed.type.kind !== 'number')
			throw new Trouble('value', at, `\`${at.typed}\` is no single number.`, {
				mend: 'Draw a quantity that is one.',
			});
		if (quantities.findIndex(({ name }) => name === at.name) !== i)
			throw new Trouble('duplicate', at, `\`${at.typed}\` is drawn already.`, {
				mend: 'Name each quantity once.',
			});
		return { at, line, name: line.defined?.typed ?? at.typed, type: computed.type };
	});
	const [first, ...others] = drawn;
	for (const { at, type } of others)
		if (first && (differ(first.type, type) || first.type.point !== type.point))
			throw new Trouble(
				'dimension',
				at,
				`\`${at.typed}\` is in ${spoken(type)}, \`${first.at.typed}\` in ${spoken(first.type)}: one axis cannot hold both.`,
				{ mend: 'Draw it in a curve cell of its own.' },
			);
	return drawn;
}

function independent(quantity: SweepName, over: SweepName): Trouble {
	const same = quantity.name === over.name;
	return new Trouble(
		'value',
		quantity,
		same
			? `\`${quantity.typed}\` over itself is a straight line.`
			: `\`${quantity.typed}\` does not depend on \`${over.typed}\`.`,
		{ mend: 'Draw a quantity that is computed from it.' },
	);
}

function tooMuch(text: string): Trouble {
	const most = String(bounds.sweepSteps).replace(/\B(?=(\d{3})+$)/g, '\u202f');
	return new Trouble(
		'tooLong',
		{ from: 0, to: text.length },
		`The curves of a note may take ${most} operations, which are used up here.`,
		{ mend: 'Ask for fewer points: `in 21 points`.' },
	);
}

function seriesOf(
	{ name, line }: Drawn,
	values: readonly (PointValue | undefined)[],
	note: Note,
	options: Options,
): SweepSeries {
	const computed = note.computed.get(line)!;
	const doubtful = values.some((one) => one?.expandedUncertainty !== undefined);
	const enclosed = values.some((one) => one?.worst !== undefined);
	return {
		name,
		values: values.map((one) => finite(one?.value)),
		...(doubtful && {
			expandedUncertainties: values.map((one) => one?.expandedUncertainty ?? (one ? 0 : null)),
		}),
		...(enclosed && {
			worstCase: {
				lower: values.map((one) => finite(one?.worst?.lower ?? one?.value)),
				upper: values.map((one) => finite(one?.worst?.upper ?? one?.value)),
			},
		}),
		present: fromSI(Number(computed.value), unitOf(computed.type)),
		presentText: shown(computed, note.doubts, options.coverage).readout.text,
	};
}

function finite(value: number | undefined): number | null {
	return value !== undefined && Number.isFinite(value) ? value : null;
}

/** Sentences about points that have no value. Throws Trouble where none has. */
function missing(
	samples: readonly Sample[],
	x: readonly number[],
	read: (x: number) => string,
	over: SweepName,
): string[] {
	const without = samples.flatMap((sample, i) =>
		sample.values.some((value) => value === undefined) ? [i] : [],
	);
	const [first] = without;
	if (first === undefined) return [];
	const why = samples[first]?.trouble;
	const reason = why ? ` ${why.message}` : '';
	if (without.length === samples.length)
		throw new Trouble('value', over, `No point of the range has a value.${reason}`);
	const count = without.length === 1 ? '1 point has' : `${without.length} points have`;
	return [`${count} no value, the first at ${over.typed} = ${read(x[first]!)}.${reason}`];
}
