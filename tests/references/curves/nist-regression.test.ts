import { fromNumbers } from '$lib/calc/curves/columns';
import { narrow } from '$lib/calc/curves/double-double';
import { fitPolynomial } from '$lib/calc/curves/fit';
import { solve } from '$lib/calc/curves/least-squares';
import { isRefusal } from '$lib/calc/tables/refusal';
import { expect, it } from 'vitest';
import type { Case } from '$lib/proof/case';
import { findCase } from '$lib/proof/cases';
import { digitsOf } from '$lib/proof/judge';

// NIST/ITL Statistical Reference Datasets, linear least squares: the sets that no curve cell can state.
const withoutIntercept = ['strd-lin-noint1', 'strd-lin-noint2'].map(findCase);

/** Certified digits that every figure of every set must reach, of the 15 printed ones. */
const least = 13;

function columnOf({ readings }: Case, name: string): number[] {
	return readings?.find((column) => column.name === name)?.values ?? [];
}

function digits(computed: number | null, published: string): number {
	return computed === null ? Number.NaN : digitsOf(computed, Number(published));
}

function certified(set: Case, pattern: RegExp): { power: number; published: string }[] {
	return set.figures.flatMap(({ quantity, published }) => {
		const found = pattern.exec(quantity);
		return found && published !== null ? [{ power: Number(found[1]), published }] : [];
	});
}

function figure(set: Case, quantity: string): string {
	return set.figures.find((entry) => entry.quantity === quantity)?.published ?? 'missing';
}

it.each(withoutIntercept)('$title: every certified figure to at least 13 digits', (set) => {
	const coefficients = certified(set, /^B(\d+)$/);
	const fit = fitPolynomial(
		{ x: columnOf(set, 'x'), y: columnOf(set, 'y') },
		{
			degree: Math.max(...coefficients.map(({ power }) => power)),
			intercept: coefficients[0]?.power === 0,
		},
	);
	if (isRefusal(fit)) throw new Error(fit.message);
	for (const { power, published } of coefficients)
		expect(digits(fit.coefficients[power] ?? null, published), `B${power}`).toBeGreaterThan(least);
	for (const { power, published } of certified(set, /^sd\(B(\d+)\)$/))
		expect(digits(fit.standardUncertainties[power] ?? null, published)).toBeGreaterThan(least);
	expect(
		digits(fit.residualStandardDeviation, figure(set, 'residual standard deviation')),
	).toBeGreaterThan(least);
	expect(digits(fit.rSquared, figure(set, 'R-squared'))).toBeGreaterThan(least);
	const fStatistic = set.figures.find(({ quantity }) => quantity === 'F statistic')?.published;
	if (fStatistic !== undefined && fStatistic !== null)
		expect(digits(fit.fStatistic, fStatistic)).toBeGreaterThan(least);
});

it('Longley, six variables, through the solver itself: the language fits curves of one variable only', () => {
	const set = findCase('strd-lin-longley');
	const y = columnOf(set, 'y');
	const design = [fromNumbers(y.map(() => 1))].concat(
		[1, 2, 3, 4, 5, 6].map((k) => fromNumbers(columnOf(set, `x${k}`))),
	);
	const solution = solve(design, fromNumbers(y));
	if ('dependent' in solution) throw new Error('Longley is of full rank');
	const s = Math.sqrt(narrow(solution.residualSquares) / (y.length - design.length));
	for (const { power, published } of certified(set, /^B(\d+)$/))
		expect(digits(narrow(solution.coefficients[power]!), published)).toBeGreaterThan(least);
	for (const { power, published } of certified(set, /^sd\(B(\d+)\)$/)) {
		const deviation = s * Math.hypot(...solution.inverse[power]!.map(narrow));
		expect(digits(deviation, published)).toBeGreaterThan(least);
	}
	expect(digits(s, figure(set, 'residual standard deviation'))).toBeGreaterThan(least);
});
