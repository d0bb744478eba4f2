import { isRefusal } from '$lib/calc/tables/refusal';
import { expect, it } from 'vitest';
import { mean, standardDeviation, sum, variance } from './univariate';

it('adds without losing what is small beside what is large', () => {
	expect(sum([1e16, 1, -1e16])).toBe(1);
	expect(sum(new Array<number>(10).fill(0.1))).toBe(1);
	expect(sum([])).toBe(0);
});

it('keeps in range where plain sums and squares leave it', () => {
	expect(mean([1.6e308, 1.6e308])).toBe(1.6e308);
	expect(standardDeviation([1e200, 3e200])).toBeCloseTo(Math.SQRT2 * 1e200, -188);
	expect(standardDeviation([1e-200, 3e-200])).toBeCloseTo(Math.SQRT2 * 1e-200, 210);
	expect(isRefusal(sum([1.6e308, 1.6e308]))).toBe(true);
});

it('does not see a scatter among equal readings', () => {
	expect(standardDeviation([0.1, 0.1, 0.1])).toBe(0);
	expect(variance([0.1, 0.1, 0.1])).toBe(0);
});

it.each([
	['a mean of nothing', () => mean([]), 'This needs at least a reading; there are 0'],
	['the scatter of one reading', () => standardDeviation([1]), 'at least 2 readings; there are 1'],
	['a reading that is not finite', () => mean([1, NaN]), 'Row 2 of values is not a finite number'],
])('refuses %s', (_, compute, message) => {
	const answer = compute();
	expect(isRefusal(answer) && answer.message).toContain(message);
});
