import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lineFunction } from '$lib/calc/doubt/model';
import { simulate } from '$lib/calc/doubt/monte-carlo';
import type { Formula } from './sheet';
import { directly, estimates, names, secondOf, sheetOf, smooth } from './formulas';

/** A value of the second line at deviations of the three inputs, computed without a tape. */
function plainly(formula: Formula, deviations: readonly number[]): number {
	const at = Object.fromEntries(
		names.map((name, i) => [name, estimates[name as 'p'] + deviations[i]!]),
	);
	return secondOf(directly(formula, at), at.q!);
}

/** Whether a formula jumps near the estimates: atan2 does on its cut, and hypot has a corner at zero. */
function isTame(formula: Formula): boolean {
	const values = [-1, -0.5, 0, 0.5, 1].map((way) =>
		plainly(formula, [0.01 * way, 0.02 * way, 0.05 * way]),
	);
	return values.every((value) => Number.isFinite(value) && Math.abs(value) < 1e4);
}

describe('A tape', () => {
	it('has the value of the formula', () => {
		fc.assert(
			fc.property(smooth, (formula) => {
				const first = directly(formula, estimates);
				const sheet = sheetOf(formula);
				fc.pre(Number.isFinite(first));
				expect(sheet.value('first')).toBe(first);
				expect(sheet.value('second')).toBeCloseTo(secondOf(first, estimates.q), 9);
			}),
			{ numRuns: 500 },
		);
	});

	it('has the derivatives that central differences approach', () => {
		fc.assert(
			fc.property(smooth, (formula) => {
				fc.pre(isTame(formula));
				const { support, gradient } = sheetOf(formula).propagated('second');
				for (const [i, input] of support.entries()) {
					const f = (h: number) =>
						plainly(
							formula,
							names.map((_, k) => (k === input ? h : 0)),
						);
					const slopes = [1e-3, 5e-4].map((h) => (f(h) - f(-h)) / (2 * h));
					const limit = (4 * slopes[1]! - slopes[0]!) / 3;
					// What halving the step changed bounds the error; corners within the step are left out.
					const error = Math.abs(slopes[1]! - slopes[0]!);
					fc.pre(error < 1e-3 * (1 + Math.abs(limit)));
					expect(Math.abs(gradient[i]! - limit)).toBeLessThan(
						2 * error + 1e-7 * (1 + Math.abs(limit)),
					);
				}
			}),
			{ numRuns: 500 },
		);
	});

	it('has the second and third derivatives that differences of its gradient approach', () => {
		fc.assert(
			fc.property(smooth, (formula) => {
				fc.pre(isTame(formula));
				const { support, curvature } = sheetOf(formula).propagated('second');
				const n = support.length;
				if (!curvature) throw new Error('No second order');
				fc.pre(curvature.length > 0);
				const u = [0.01 / Math.sqrt(3), 0.02 / Math.sqrt(3), 0.05 / 3];
				for (const [j, input] of support.entries()) {
					const at = (h: number) =>
						plainly(
							formula,
							names.map((_, k) => (k === input ? h * u[input]! : 0)),
						);
					const bend = (h: number) => (at(h) - 2 * at(0) + at(-h)) / (h * h);
					const rough = Math.abs(bend(1) - bend(0.5));
					const noise = 1e-10 * (1 + Math.abs(at(0)));
					fc.pre(rough < 0.05 * Math.abs(bend(1)) + noise);
					expect(Math.abs(curvature[j * n + j]! - bend(0.5))).toBeLessThan(rough + 10 * noise);
					const twist = (h: number) =>
						(at(2 * h) - 2 * at(h) + 2 * at(-h) - at(-2 * h)) / (2 * h ** 3);
					const wild = Math.abs(twist(1) - twist(0.5));
					fc.pre(wild < 0.05 * Math.abs(twist(1)) + noise);
					expect(Math.abs(curvature[n * n + j * n + j]! - twist(0.5))).toBeLessThan(
						wild + 10 * noise,
					);
				}
				// Second derivatives do not depend on the order in which they are taken.
				for (let j = 0; j < n; j++)
					for (let i = 0; i < j; i++) {
						const [x, y] = [curvature[j * n + i]!, curvature[i * n + j]!];
						expect(Math.abs(x - y)).toBeLessThan(1e-9 * (1e-3 + Math.abs(x)));
					}
			}),
			{ numRuns: 400 },
		);
	});
});

describe('The worst case', () => {
	it('holds every trial where it is called exact, and is reached', () => {
		let exact = 0;
		fc.assert(
			fc.property(smooth, fc.nat(), (formula, seed) => {
				const sheet = sheetOf(formula);
				const worst = sheet.worst('second');
				if (!worst.exact) return;
				exact++;
				const f = lineFunction(sheet.model, sheet.place('second'));
				const slack = 1e-12 * (1 + Math.abs(worst.lower) + Math.abs(worst.upper));
				expect(worst.lower).toBeLessThanOrEqual(sheet.value('second') + slack);
				const random = new Random(seed);
				let [low, high] = [Infinity, -Infinity];
				for (let k = 0; k < 200; k++) {
					const value = f(Float64Array.from([0.01, 0.02, 0.05], (width) => width * random.next()));
					low = Math.min(low, value);
					high = Math.max(high, value);
				}
				expect(low).toBeGreaterThanOrEqual(worst.lower - slack);
				expect(high).toBeLessThanOrEqual(worst.upper + slack);
			}),
			{ numRuns: 400 },
		);
		expect(exact).toBeGreaterThan(50);
	});

	it('is proved by ranges that hold every value and every derivative', () => {
		fc.assert(
			fc.property(smooth, fc.nat(), (formula, seed) => {
				const sheet = sheetOf(formula);
				const { range, slopes } = sheet.enclosure('second');
				const random = new Random(seed);
				for (let k = 0; k < 20; k++) {
					const [p, q, r] = [0.01, 0.02, 0.05].map((width) => width * random.next());
					const here = sheetOf(shifted(formula, { p: p!, q: q!, r: r! }));
					const { value, support, gradient } = here.propagated('first');
					expect(sheet.enclosure('first').range[0]).toBeLessThanOrEqual(value);
					expect(sheet.enclosure('first').range[1]).toBeGreaterThanOrEqual(value);
					for (const [i, input] of support.entries()) {
						const [low, high] = sheet.enclosure('first').slopes.get(input)!;
						const slack = 1e-12 * (1 + Math.abs(gradient[i]!));
						expect(gradient[i]!).toBeGreaterThanOrEqual(low - slack);
						expect(gradient[i]!).toBeLessThanOrEqual(high + slack);
					}
				}
				expect(range[0]).toBeLessThanOrEqual(sheet.value('second'));
				expect(range[1]).toBeGreaterThanOrEqual(sheet.value('second'));
				expect(slopes.size).toBeGreaterThan(0);
			}),
			{ numRuns: 60 },
		);
	});

	it('is searched where the line is not monotonic, and says so', () => {
		const sheet = sheetOf(['powi', ['sub', 'p', estimates.p], 2]);
		const { lower, upper, exact } = sheet.worst('first');
		expect(exact).toBe(false);
		expect(lower).toBeCloseTo(0, 15);
		expect(upper).toBeCloseTo(1e-4, 12);
	});
});

describe('Trials', () => {
	it('have the moments that first order says, of a line that is nearly straight', () => {
		const sheet = sheetOf(['mul', 'p', 'q']);
		const [result] = simulate(sheet.model, [sheet.place('first')], { seed: 5, trials: 100_000 });
		const u = sheet.uncertainty('first').standardUncertainty;
		expect(Math.abs(result!.standardUncertainty / u - 1)).toBeLessThan(0.012);
	});
});

/** The same formula with its inputs moved. */
function shifted(formula: Formula, by: Readonly<Record<string, number>>): Formula {
	if (typeof formula === 'number') return formula;
	if (typeof formula === 'string') return ['add', formula, by[formula]!];
	if (formula.length === 2) return [formula[0], shifted(formula[1], by)];
	return [formula[0], shifted(formula[1], by), shifted(formula[2], by)];
}

/** Numbers between −1 and 1 for tests, from a linear congruence. */
class Random {
	constructor(private state: number) {}

	next(): number {
		this.state = (Math.imul(this.state, 1664525) + 1013904223) | 0;
		return this.state / 2147483648;
	}
}
