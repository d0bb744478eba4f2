import * as math from 'mathjs';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { quantile, row, type Row } from './row';
import { lastName, sixtyLines } from './sixty-lines';

const rounds = 60;

/** Evaluating a note of 60 worked lines, against bare mathjs that evaluates the same lines. */
export function engineRows(): Row[] {
	const cells = sixtyLines.map((cell, index) => ({ id: `c${index}`, ...cell }));
	const sources = cells.filter((cell) => cell.kind === 'calculation').map((cell) => cell.source);

	const ours = evaluate(cells, defaultOptions).quantities[lastName]?.value;
	const scope = new Map<string, unknown>();
	math.evaluate(sources, scope);
	const theirs = (scope.get(lastName) as math.Unit).toNumber('V');
	if (typeof ours !== 'number' || Math.abs(ours / theirs - 1) > 1e-9) {
		throw new Error(`the two evaluations disagree: ${String(ours)} V and ${theirs} V`);
	}
	return [
		row({
			id: 'engine.note-60',
			what: 'evaluate a note of 60 worked lines; peer: bare mathjs, same lines',
			value: medianMs(() => void evaluate(cells, defaultOptions)),
			unit: 'ms',
			target: 20,
			peer: medianMs(() => void math.evaluate(sources, new Map())),
		}),
	];
}

function medianMs(work: () => void): number {
	for (let warm = 0; warm < 20; warm++) work();
	const sample = Array.from({ length: rounds }, () => {
		const from = performance.now();
		work();
		return performance.now() - from;
	});
	return quantile(sample, 0.5);
}
