import { expect, it } from 'vitest';
import { compensatedPolynomial, derivativeOf, polynomial, refusePolynomial } from './polynomial';
import { findCrossing } from './root';

it('gives value and slope', () => {
	expect(polynomial(2, [1, -3, 0, 5])).toEqual({ value: 35, derivative: 57 });
	expect(derivativeOf([1, -3, 0, 5])).toEqual([-3, 0, 15]);
	expect(polynomial(2, [])).toEqual({ value: 0, derivative: 0 });
});

it('keeps its digits where terms cancel', () => {
	// (x − 1)⁷ near 1, from its expanded coefficients: plain arithmetic has no digit left.
	const expanded = [-1, 7, -21, 35, -35, 21, -7, 1];
	const x = 1 + 2 ** -8;
	expect(compensatedPolynomial(x, expanded).value).toBe(2 ** -56);
	expect(polynomial(x, expanded).value).not.toBe(2 ** -56);
});

it('refuses a coefficient that is not finite', () => {
	expect(refusePolynomial(1, [1, NaN])).toMatchObject({ argument: 'c1' });
	expect(refusePolynomial(1, [1, 2])).toBeUndefined();
});

it('finds crossings where Newton alone would leave the bracket or creep', () => {
	const steep = (x: number) => ({ value: Math.cbrt(x), derivative: 1 / (3 * Math.cbrt(x) ** 2) });
	expect(findCrossing(steep, 0, -1, 2)).toBeCloseTo(0, 12);
	const flat = (x: number) => ({ value: -(x ** 9), derivative: -9 * x ** 8 });
	expect(findCrossing(flat, -1e-9, -3, 5)).toBeCloseTo(0.1, 15);
});
