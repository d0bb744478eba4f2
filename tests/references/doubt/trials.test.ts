import { describe, expect, it } from 'vitest';
import { needsTrials, secondOrderOf } from '$lib/calc/doubt/budget';
import { normal } from '$lib/calc/doubt/distributions/normal';
import { rectangular } from '$lib/calc/doubt/distributions/rectangular';
import { tolerance } from '$lib/calc/doubt/intervals';
import { simulate, type TrialResult } from '$lib/calc/doubt/monte-carlo';
import { validate } from '$lib/calc/doubt/validation';
import { caseOf, check, titleOf } from './published';
import { Sheet, type Formula } from './sheet';

const trials = 400_000;

function run(sheet: Sheet, name: string): TrialResult {
	return simulate(sheet.model, [sheet.place(name)], { seed: 20_080_901, trials })[0]!;
}

/**
 * How far an end of a 95 % interval of so many trials may lie from the exact one: five standard errors of a 2.5 %
 * quantile, √(p(1−p)/M) over the density there, which for the shapes here is about 0.06/u or more.
 */
function slack(u: number): number {
	return ((5 * Math.sqrt(0.025 * 0.975)) / Math.sqrt(trials) / 0.05) * u;
}

const sum: Formula = ['add', ['add', 'X1', 'X2'], ['add', 'X3', 'X4']];
const four = (distribution: ReturnType<typeof normal>) =>
	['X1', 'X2', 'X3', 'X4']
		.reduce((sheet, name) => sheet.input(name, 0, distribution), new Sheet())
		.line('Y', sum);

describe(titleOf('s1-9.2.2'), () => {
	const id = 's1-9.2.2';
	const sheet = four(normal(1));

	it('agrees to first order and by trials', () => {
		const { standardUncertainty, expandedUncertainty } = sheet.uncertainty('Y');
		check(id, 'GUF y', sheet.value('Y'));
		check(id, 'GUF u(y)', standardUncertainty);
		check(id, 'GUF 95 % low', -expandedUncertainty);
		check(id, 'GUF 95 % high', expandedUncertainty);
		const { symmetric, mean, standardUncertainty: u } = run(sheet, 'Y');
		expect(Math.abs(mean)).toBeLessThan((5 * 2) / Math.sqrt(trials));
		expect(Math.abs(u - 2)).toBeLessThan((5 * 2) / Math.sqrt(2 * trials));
		expect(Math.abs(symmetric[0] + 3.919928)).toBeLessThan(slack(2));
		expect(Math.abs(symmetric[1] - 3.919928)).toBeLessThan(slack(2));
		expect(validate(0, 2, expandedUncertainty, symmetric).holds).toBe(true);
	});
});

describe(titleOf('s1-9.2.3'), () => {
	const id = 's1-9.2.3';
	const sheet = four(rectangular(Math.sqrt(3)));

	it('has a narrower interval by trials, valid to one digit of the tolerance and not to the next', () => {
		const { standardUncertainty, expandedUncertainty } = sheet.uncertainty('Y');
		check(id, 'GUF u(y)', standardUncertainty);
		check(id, 'GUF 95 % high', expandedUncertainty);
		const { symmetric } = run(sheet, 'Y');
		const end = 2 * Math.sqrt(3) * (2 - 0.6 ** 0.25);
		check(id, 'analytic half-width 2 sqrt(3) [2 - (3/5)^(1/4)]', end);
		expect(Math.abs(symmetric[0] + end)).toBeLessThan(slack(2));
		expect(Math.abs(symmetric[1] - end)).toBeLessThan(slack(2));
		expect(validate(0, 2, expandedUncertainty, [-end, end], 2)).toMatchObject({
			tolerance: 0.05,
			holds: true,
		});
		expect(validate(0, 2, expandedUncertainty, [-end, end], 3).holds).toBe(false);
	});
});

describe(titleOf('s1-9.3'), () => {
	const id = 's1-9.3';
	const sheet = new Sheet()
		.input('mRc', 100_000, normal(0.05))
		.input('dmRc', 1.234, normal(0.02))
		.input('rhoA', 1.2, rectangular(0.1))
		.input('rhoW', 8000, rectangular(1000))
		.input('rhoR', 8000, rectangular(50))
		.line('buoyancy', [
			'mul',
			['sub', 'rhoA', 1.2],
			['sub', ['div', 1, 'rhoW'], ['div', 1, 'rhoR']],
		])
		.line('dm', ['sub', ['mul', ['add', 'mRc', 'dmRc'], ['add', 1, 'buoyancy']], 100_000]);

	it('shows that first order misses the buoyancy, and by how much second order finds it', () => {
		const { standardUncertainty, expandedUncertainty } = sheet.uncertainty('dm');
		check(id, 'GUF1 (first order) dm', sheet.value('dm'));
		check(id, 'GUF1 u', standardUncertainty);
		check(id, 'GUF1 95 % low', 1.234 - expandedUncertainty);
		const second = secondOrderOf(sheet.propagated('dm'), sheet.doubts)!;
		check(id, 'GUF2 (with higher-order terms) u', second.standardUncertainty);
		check(id, 'GUF2 95 % low', 1.234 - 1.959963985 * second.standardUncertainty);
		expect(second.change).toBeGreaterThan(0.3);
		expect(needsTrials(sheet.propagated('dm'), sheet.doubts)).toBe(true);
	});

	it('agrees with the exact moments by trials', () => {
		const { mean, standardUncertainty, symmetric, shortest } = run(sheet, 'dm');
		const exact = caseOf(id).exact!;
		expect(Math.abs(mean - 1.234)).toBeLessThan((5 * exact.u_mg) / Math.sqrt(trials));
		expect(Math.abs(standardUncertainty - exact.u_mg)).toBeLessThan(5e-4);
		// Print and recomputation differ by 0.001 in place and agree in length; the ends are those of a long run.
		expect(Math.abs(symmetric[0] - exact.our_MC_symmetric_95[0])).toBeLessThan(slack(exact.u_mg));
		expect(Math.abs(symmetric[1] - exact.our_MC_symmetric_95[1])).toBeLessThan(slack(exact.u_mg));
		expect(Math.abs(shortest[1] - shortest[0] - 0.29907)).toBeLessThan(0.002);
	});
});

describe.each([
	['s1-9.4-r0-x0.000', 0],
	['s1-9.4-r0-x0.010', 0.01],
	['s1-9.4-r0-x0.050', 0.05],
])('%s', (id, x1) => {
	const sheet = new Sheet()
		.input('X1', x1, normal(0.005))
		.input('X2', 0, normal(0.005))
		.line('loss', ['add', ['powi', 'X1', 2], ['powi', 'X2', 2]]);

	it(titleOf(id), () => {
		const { standardUncertainty, expandedUncertainty } = sheet.uncertainty('loss');
		check(id, 'first-order estimate', sheet.value('loss') * 1e6);
		check(id, 'first-order u', standardUncertainty * 1e6);
		check(id, 'first-order 95 % low', (sheet.value('loss') - expandedUncertainty) * 1e6);
		check(id, 'first-order 95 % high', (sheet.value('loss') + expandedUncertainty) * 1e6);
		const second = secondOrderOf(sheet.propagated('loss'), sheet.doubts)!;
		check(id, 'MCM / analytical u', second.standardUncertainty * 1e6);
		check(id, 'MCM / analytical estimate', (sheet.value('loss') + second.shift) * 1e6);
		const u = second.standardUncertainty;
		expect(needsTrials(sheet.propagated('loss'), sheet.doubts)).toBe(x1 < 0.05);

		const result = run(sheet, 'loss');
		const { exact_symmetric_95_1e6: exact, exact_shortest_95_1e6: short } = caseOf(id);
		expect(Math.abs(result.mean - x1 * x1 - 5e-5)).toBeLessThan((5 * u) / Math.sqrt(trials));
		expect(Math.abs(result.symmetric[0] - exact![0] * 1e-6)).toBeLessThan(slack(u));
		expect(Math.abs(result.symmetric[1] - exact![1] * 1e-6)).toBeLessThan(slack(u));
		const length = (short![1] - short![0]) * 1e-6;
		expect(Math.abs(result.shortest[1] - result.shortest[0] - length)).toBeLessThan(slack(u));
	});
});

describe('Correlated inputs by trials', () => {
	it('reproduce the exact variance of a sum of squares, JCGM 101:2008, 9.4.3 (from memory, formula recomputed)', () => {
		const r = 0.9;
		const sheet = new Sheet()
			.input('X1', 0.01, normal(0.005))
			.input('X2', 0, normal(0.005))
			.correlated('X1', 'X2', r)
			.line('loss', ['add', ['powi', 'X1', 2], ['powi', 'X2', 2]]);
		const exact = Math.sqrt(4 * 0.005 ** 4 * (1 + r * r) + 4 * 0.005 ** 2 * 0.01 ** 2);
		const second = secondOrderOf(sheet.propagated('loss'), sheet.doubts)!;
		expect(second.standardUncertainty).toBeCloseTo(exact, 10);
		expect(Math.abs(run(sheet, 'loss').standardUncertainty / exact - 1)).toBeLessThan(0.01);
	});
});

describe('Numerical tolerance', () => {
	it.each([
		[0.00035, 2, 0.000005],
		[0.27, 2, 0.005],
		[2, 2, 0.05],
		[9.96, 2, 0.5],
	])('of %d to %d digits is %d (JCGM 101:2008, 7.9.2)', (u, digits, delta) => {
		expect(tolerance(u, digits)).toBeCloseTo(delta, 12);
	});
});
