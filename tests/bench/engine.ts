import * as math from 'mathjs';
import { Calculator } from '$lib/calc/calculator';
import { budgetOf, uncertaintyOf, type Doubts } from '$lib/calc/doubt/budget';
import type { Model } from '$lib/calc/doubt/model';
import { propagate, type Propagated } from '$lib/calc/doubt/propagate';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { Memory } from '$lib/calc/memory';
import { Note } from '$lib/calc/note';
import { readLines } from '$lib/calc/note-lines';
import type { SourceCell } from '$lib/calc/results';
import { modelOf } from '$lib/calc/steps';
import { stepOf } from '$lib/calc/uncertainty';
import { agree, medianMs } from './clock';
import { last200, lines200 } from './note-200';
import { python } from './python';
import { row, type Row } from './row';
import { lastName, sixtyLines } from './sixty-lines';

/** Evaluating notes, against bare mathjs and python3-uncertainties with the same lines. */
export function engineRows(): Row[] {
	return [sixty(), values200(), edit2000(), ...budgets200()];
}

function cellOf(lines: readonly string[]): SourceCell[] {
	return [{ id: 'c', kind: 'calculation', source: lines.join('\n') }];
}

function sixty(): Row {
	const cells = sixtyLines.map((cell, index) => ({ id: `c${index}`, ...cell }));
	const sources = cells.filter((cell) => cell.kind === 'calculation').map((cell) => cell.source);
	const scope = new Map<string, unknown>();
	math.evaluate(sources, scope);
	const theirs = (scope.get(lastName) as math.Unit).toNumber('V');
	agree(evaluate(cells, defaultOptions).quantities[lastName]?.value, theirs);
	return row({
		id: 'engine.note-60',
		what: 'evaluate a note of 60 worked lines; peer: bare mathjs, same lines',
		value: medianMs(() => void evaluate(cells, defaultOptions)),
		unit: 'ms',
		target: 20,
		peer: medianMs(() => void math.evaluate(sources, new Map())),
	});
}

function values200(): Row {
	const lines = lines200(false);
	const cells = cellOf(lines);
	const compiled = lines.map((line) => math.compile(line));
	const bare = () => {
		const scope = new Map<string, unknown>();
		for (const line of compiled) line.evaluate(scope);
		return scope;
	};
	const theirs = (bare().get(last200) as math.Unit).toNumber('V');
	agree(evaluate(cells, defaultOptions).quantities[last200]?.value, theirs);
	return row({
		id: 'engine.values-200',
		what: 'evaluate a note of 200 lines, values only; peer: bare mathjs, the same compiled lines',
		value: medianMs(() => void evaluate(cells, defaultOptions)),
		unit: 'ms',
		peer: medianMs(() => void bare()),
		most: 1.5,
	});
}

function edit2000(): Row {
	const notes = ['1 ohm', '2 ohm'].map((first) =>
		cellOf(
			Array.from({ length: 2_000 }, (_, i) => {
				if (i === 0) return `R_0 = ${first}`;
				return i % 10 === 0 ? `R_${i} = ${i} ohm` : `R_${i} = R_${i - 1} * 1.01 + 2 ohm`;
			}),
		),
	);
	const calculator = new Calculator();
	let edit = 0;
	return row({
		id: 'engine.edit-2000',
		what: 'one edit in a note of 2,000 lines, results out; peer: the whole note anew',
		value: medianMs(() => void calculator.evaluate(notes[++edit % 2]!, defaultOptions)),
		unit: 'ms',
		target: 10,
		peer: medianMs(() => void evaluate(notes[0]!, defaultOptions), 15),
	});
}

function budgets200(): Row[] {
	const [plain, doubtful] = [cellOf(lines200(false)), cellOf(lines200(true))];
	const { lines } = readLines(doubtful, {});
	const note = new Note(lines, {}, new Memory());
	const steps = [...note.computed.values()].flatMap((computed) => stepOf(computed) ?? []);
	const { doubts } = note;
	const { model } = modelOf(steps, note.inputs);
	const peer = python('budgets.py', '15');
	const last = stepOf(note.find(last200)!)!;
	if (peer) {
		const { standardUncertainty } = uncertaintyOf(last.propagated, doubts, 0.95);
		agree(standardUncertainty, peer.standardUncertainty);
	}
	return [
		row({
			id: 'engine.budgets-200',
			what: 'evaluate it with 30 inputs in doubt, uncertainties and second order of all lines, and all budgets; peer: its plain evaluation',
			value: medianMs(() => {
				evaluate(doubtful, defaultOptions);
				for (const { propagated } of steps) budgetOf(propagated, note.doubts);
			}),
			unit: 'ms',
			peer: medianMs(() => void evaluate(plain, defaultOptions)),
			most: 10,
		}),
		row({
			id: 'engine.first-order-200',
			what: 'values, uncertainties and budgets of all its lines, compiled; peer: python3-uncertainties, same formulas',
			value: medianMs(() => budgetsOf(model, doubts)),
			unit: 'ms',
			...(peer && { peer: peer.ms }),
			most: 1 / 20,
		}),
	];
}

/** First order and budgets of all lines, from their tapes. */
function budgetsOf(model: Model, doubts: Doubts): void {
	const lines: Propagated[] = [];
	for (const { tape, args, inputs } of model.steps) {
		const given: Propagated[] = [];
		for (let k = 0; k < args.length; k++) given.push(lines[args[k]!]!);
		const line = propagate(tape, given, inputs, doubts.uncertainties, false);
		lines.push(line);
		uncertaintyOf(line, doubts, 0.95);
		budgetOf(line, doubts);
	}
}
