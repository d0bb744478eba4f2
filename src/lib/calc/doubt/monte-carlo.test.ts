import { describe, expect, it } from 'vitest';
import { correlate } from './correlations';
import type { Distribution } from './distributions/distribution';
import { normal } from './distributions/normal';
import { rectangular } from './distributions/rectangular';
import { student } from './distributions/student';
import type { Model } from './model';
import { simulate, Simulation, summarise } from './monte-carlo';
import { awaitOthers, sharedDraw, takePart } from './shared-trials';
import { sorted } from './sort';
import { TapeBuilder } from './tape';

/** Inputs as lines 0, 1, …, and after them their sum and the logarithm of the first. */
function model(made: unknown[], r?: number): Model {
	const inputs = made as Distribution[];
	const steps: Model['steps'][number][] = inputs.map((_, i) => {
		const tape = new TapeBuilder();
		return { tape: tape.finish(tape.input(0)), args: [], inputs: [i] };
	});
	const sum = new TapeBuilder();
	const total = inputs.map((_, i) => sum.argument(i)).reduce((x, y) => sum.binary('add', x, y));
	steps.push({ tape: sum.finish(total), args: inputs.map((_, i) => i), inputs: [] });
	const log = new TapeBuilder();
	steps.push({ tape: log.finish(log.unary('log', log.argument(0))), args: [0], inputs: [] });
	if (r === undefined) return { steps, inputs };
	const correlations = correlate([{ first: 0, second: 1, coefficient: r }]);
	if ('fault' in correlations) throw new Error(correlations.message);
	return { steps, inputs, correlations };
}

const two = model([normal(1), rectangular(2)]);

function correlation(x: Float64Array, y: Float64Array): number {
	let [sxy, sxx, syy] = [0, 0, 0];
	x.forEach((value, i) => {
		sxy += value * y[i]!;
		sxx += value * value;
		syy += y[i]! * y[i]!;
	});
	return sxy / Math.sqrt(sxx * syy);
}

describe('Trials', () => {
	const whole = simulate(two, [2], { seed: 9, trials: 12_345 })[0]!;

	it('are the same for the same seed and others for another', () => {
		expect(simulate(two, [2], { seed: 9, trials: 12_345 })[0]).toEqual(whole);
		expect(simulate(two, [2], { seed: 10, trials: 12_345 })[0]!.mean).not.toBe(whole.mean);
	});

	it('are the same whatever is drawn at once', () => {
		const simulation = new Simulation(two, [2], { seed: 9, trials: 12_345 });
		while (!simulation.done) simulation.advance(1);
		expect(simulation.results()[0]).toEqual(whole);
	});

	it('are the same whichever other lines are asked for', () => {
		expect(simulate(two, [0, 2, 1], { seed: 9, trials: 12_345 })[1]).toEqual(whole);
	});

	it('are the same put together from the parts of several workers', () => {
		const draw = sharedDraw(1, 12_345, 9);
		// Another thread has taken the first four stretches and draws them later.
		Atomics.store(draw.counter, 0, 4);
		takePart(two, [2], draw);
		Atomics.store(draw.counter, 0, 0);
		takePart(two, [2], draw);
		awaitOthers(draw);
		expect(summarise(draw.values[0]!, {})).toEqual(whole);
	});

	it('tell their progress and stop when asked to', () => {
		const told: number[] = [];
		const [result] = simulate(two, [2], { seed: 1, trials: 100_000 }, (drawn) => {
			told.push(drawn);
			return drawn < 40_000;
		});
		expect(told).toEqual([20_000, 40_000]);
		expect(result!.trials).toBe(40_000);
	});

	it('leave out values that are no numbers and count them', () => {
		const [result] = simulate(two, [3], { seed: 1, trials: 20_000 });
		expect(result!.invalid).toBeGreaterThan(9_500);
		expect(result!.trials + result!.invalid).toBe(20_000);
		expect(Number.isFinite(result!.mean)).toBe(true);
	});

	it('end by themselves when their results are stable', () => {
		const simulation = new Simulation(two, [2], { seed: 4, trials: 5_000_000, adaptive: true });
		while (!simulation.done) simulation.advance();
		const [result] = simulation.results();
		expect(result!.stable).toBe(true);
		expect(simulation.progress.drawn).toBeLessThan(5_000_000);
		expect(Math.abs(result!.standardUncertainty - Math.sqrt(1 + 4 / 3))).toBeLessThan(0.05);
		const early = new Simulation(two, [2], { seed: 4, trials: 20_000, adaptive: true });
		while (!early.done) early.advance();
		expect(early.results()[0]!.stable).toBe(false);
	});

	it('count every value in the histogram', () => {
		const { counts, below, above } = whole.histogram;
		expect(counts.reduce((sum, count) => sum + count, below + above)).toBe(whole.trials);
	});
});

describe('Correlated inputs', () => {
	it.each([
		['normal', [normal(1), normal(3)], 0.8, 0.01],
		['completely', [normal(1), normal(3)], -1, 1e-9],
		['t', [student(1, 9), student(2, 9)], -0.6, 0.015],
		// Keeping both shapes costs some of the linear coefficient: 6/π arcsin(r/2) of it is left.
		['rectangular', [rectangular(1), rectangular(2)], (6 / Math.PI) * Math.asin(0.35), 0.01],
	])('of %s shape come out correlated', (name, made, expected, error) => {
		const r = name === 'rectangular' ? 0.7 : expected;
		const draw = sharedDraw(2, 100_000, 3);
		takePart(model(made, r), [0, 1], draw);
		const [x, y] = draw.values;
		expect(Math.abs(correlation(x!, y!) - expected)).toBeLessThan(error);
	});
});

describe('Sorted values', () => {
	it('are those of the sort of the language, also of lopsided ones', () => {
		const values = Float64Array.from(
			{ length: 20_000 },
			(_, i) => Math.sin(i) ** 9 * (i % 7 ? 1 : 1e6),
		);
		expect(sorted(values)).toEqual(values.slice().sort());
	});
});
