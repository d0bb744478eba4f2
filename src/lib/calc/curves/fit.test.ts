import { isRefusal } from '$lib/calc/tables/refusal';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { fitPolynomial, type Fit, type FitOptions } from './fit';
import { predict } from './predict';
import type { Readings } from './readings';

function fitted(readings: Readings, options: FitOptions): Fit {
	const fit = fitPolynomial(readings, options);
	if (isRefusal(fit)) throw new Error(fit.message);
	return fit;
}

function refused(readings: Readings, options: FitOptions = { degree: 1 }): string {
	const fit = fitPolynomial(readings, options);
	if (!isRefusal(fit)) throw new Error('This should have been refused');
	return `${fit.refused}: ${fit.message}`;
}

it('weighs readings by their stated uncertainties: two groups with known means', () => {
	// A constant through 10 ± 1 and 20 ± 2 is the weighted mean (10/1 + 20/4) / (1 + 1/4), u = 1/√(1 + 1/4).
	const fit = fitted({ x: [1, 2], y: [10, 20], uncertainties: [1, 2] }, { degree: 0 });
	expect(fit.coefficients[0]).toBeCloseTo(12, 14);
	expect(fit.standardUncertainties[0]).toBeCloseTo(1 / Math.sqrt(1.25), 14);
	expect(fit.chiSquare).toBeCloseTo(20, 12);
	expect(fit.uncertaintyDegreesOfFreedom).toBe(Infinity);
});

it('equal weights change nothing where the scatter is taken from the residuals', () => {
	const x = [0, 1, 2, 3, 4];
	const y = [1, 3.1, 4.9, 7.2, 8.8];
	const plain = fitted({ x, y }, { degree: 1 });
	const uncertainties = x.map(() => 0.37);
	const weighted = fitted({ x, y, uncertainties }, { degree: 1, spread: 'observed' });
	for (const power of [0, 1]) {
		expect(weighted.coefficients[power]).toBeCloseTo(plain.coefficients[power]!, 13);
		expect(weighted.standardUncertainties[power]).toBeCloseTo(
			plain.standardUncertainties[power]!,
			13,
		);
	}
	expect(weighted.residualStandardDeviation).toBeCloseTo(plain.residualStandardDeviation!, 13);
	const sum = plain.leverages.reduce((total, leverage) => total + leverage, 0);
	expect(sum).toBeCloseTo(2, 13);
});

it('finds the coefficients of an exact polynomial again, far from zero too', () => {
	const coefficient = fc.integer({ min: -50, max: 50 });
	fc.assert(
		fc.property(
			fc.array(coefficient, { minLength: 1, maxLength: 4 }),
			fc.constantFrom(0, 40, -300),
			(coefficients, start) => {
				const x = Array.from({ length: 9 }, (_, i) => start + i);
				const y = x.map((value) => coefficients.reduceRight((sum, c) => sum * value + c, 0));
				const fit = fitted({ x, y }, { degree: coefficients.length - 1 });
				for (const [k, c] of coefficients.entries()) expect(fit.coefficients[k]).toBeCloseTo(c, 6);
			},
		),
	);
});

it('predicts with the same uncertainty from either basis', () => {
	const x = [1, 2, 3, 4, 5, 6];
	const fit = fitted({ x, y: [2.1, 3.8, 6.2, 7.9, 10.3, 11.6] }, { degree: 2 });
	const at = predict(fit, 2.5);
	if (isRefusal(at)) throw new Error(at.message);
	const powers = [1, 2.5, 6.25];
	let variance = 0;
	for (const [j, row] of fit.covariance.entries())
		for (const [k, value] of row.entries()) variance += powers[j]! * value * powers[k]!;
	expect(at.standardUncertainty).toBeCloseTo(Math.sqrt(variance), 12);
	expect(at.readingUncertainty).toBeCloseTo(
		Math.sqrt(variance + fit.residualStandardDeviation! ** 2),
		12,
	);
	expect(at.derivative).toBeCloseTo(fit.coefficients[1]! + 5 * fit.coefficients[2]!, 12);
	expect(at.inside).toBe(true);
});

it('says no more than it knows about a new reading on a weighted curve', () => {
	const fit = fitted({ x: [0, 1, 2], y: [0, 1, 2], uncertainties: [3, 4, 5] }, { degree: 1 });
	const silent = predict(fit, 1);
	const told = predict(fit, 1, 4);
	if (isRefusal(silent) || isRefusal(told)) throw new Error('No prediction');
	expect(silent.readingUncertainty).toBeNull();
	expect(told.readingUncertainty).toBeCloseTo(Math.hypot(told.standardUncertainty, 4), 14);
});

it('fits a line through the origin', () => {
	const fit = fitted({ x: [1, 2, 3], y: [2, 4, 6.3] }, { degree: 1, intercept: false });
	expect(fit.coefficients).toEqual([0, 28.9 / 14]);
	expect(fit.standardUncertainties[0]).toBe(0);
	expect(fit.degreesOfFreedom).toBe(2);
});

it('does not lose readings in a very small or very large unit', () => {
	for (const unit of [1e-200, 1e-30, 1e30, 1e150]) {
		const y = [1, 2, 2.9, 4.1].map((value) => value * unit);
		const fit = fitted({ x: [0, 1, 2, 3], y }, { degree: 1 });
		expect(fit.coefficients[1]! / unit).toBeCloseTo(1.02, 13);
		expect(fit.rSquared).toBeGreaterThan(0.99);
	}
});

it.each([
	['columns of different length', { x: [1, 2, 3], y: [1, 2] }, 'lengths: x has 3 rows and y has 2'],
	['a value that is not finite', { x: [1, 2, 3], y: [1, NaN, 3] }, 'Row 2 of y is not a finite'],
	['an infinite x', { x: [1, Infinity, 3], y: [1, 2, 3] }, 'Row 2 of x is not a finite number'],
	['too few points', { x: [1, 2], y: [1, 2] }, 'tooFew: A straight line needs 3 points here'],
	['equal x', { x: [2, 2, 2], y: [1, 2, 3] }, 'rank: A straight line is not determined by 1'],
	[
		'a zero uncertainty',
		{ x: [1, 2, 3], y: [1, 2, 3], uncertainties: [1, 0, 1] },
		'notPositive: Row 2 has an uncertainty that is not above zero',
	],
	[
		'a negative uncertainty',
		{ x: [1, 2, 3], y: [1, 2, 3], uncertainties: [1, 1, -1] },
		'notPositive: Row 3',
	],
	[
		'uncertainties of another length',
		{ x: [1, 2, 3], y: [1, 2, 3], uncertainties: [1, 1] },
		'lengths: The uncertainties have 2 rows and y has 3',
	],
])('refuses %s', (_, readings, message) => {
	expect(refused(readings)).toContain(message);
});

it('refuses degrees that are no degrees, and x too close together for theirs', () => {
	const readings = { x: [1, 2, 3], y: [1, 2, 3] };
	expect(refused(readings, { degree: 1.5 })).toContain('degree: ');
	expect(refused(readings, { degree: -1 })).toContain('degree: ');
	expect(refused(readings, { degree: 13 })).toContain('degree: ');
	expect(refused(readings, { degree: 0, intercept: false })).toContain('degree: ');
	const crowded = { x: [0, 1e-14, 2e-14, 1, 2], y: [1, 2, 3, 4, 5] };
	expect(refused(crowded, { degree: 3 })).toContain('rank: A polynomial of degree 3');
});

it('is exact through as many points as coefficients where uncertainties are stated', () => {
	const readings = { x: [0, 10], y: [0.1, 9.9], uncertainties: [0.01, 0.02] };
	const fit = fitted(readings, { degree: 1 });
	expect(fit.residualStandardDeviation).toBeNull();
	expect(fit.standardUncertainties[1]).toBeCloseTo(Math.hypot(0.01, 0.02) / 10, 14);
});
