import { describe, expect, it } from 'vitest';
import type { Figure } from './case';
import { digitsOf, halfUnit, judge } from './judge';

function figure(about: Partial<Figure>): Figure {
	return { quantity: 'x', published: '1.23', unit: 'V', confirmed: 'recomputed', ...about };
}

describe('A computed figure', () => {
	it.each([
		['1.23', 1.2349, true],
		['1.23', 1.2351, false],
		['1.230', 1.2349, false],
		['-0.5', -0.55, true],
		['-0.5', 0.5, false],
		['6.02E+23', 6.024e23, true],
		['6.02e23', 6.026e23, false],
	])('beside the printed %s: %d agrees, %s', (published, computed, agrees) => {
		expect(judge(figure({ published }), computed).agrees).toBe(agrees);
	});

	it('is held against the recomputation where print has a slip', () => {
		const slip = figure({ agrees: false, recomputed: 1.25 });
		expect(judge(slip, 1.25).agrees).toBe(true);
		expect(judge(slip, 1.23).agrees).toBe(false);
	});

	it('must keep the recomputed figure beside the printed digits where that is asked', () => {
		const strict = figure({ recomputed: 1.2301, relative: 1e-6 });
		expect(judge(strict, 1.2301).agrees).toBe(true);
		expect(judge(strict, 1.2302).agrees).toBe(false);
	});

	it('of trials may scatter', () => {
		const wanted = figure({ recomputed: 1.2 });
		expect(judge(wanted, 1.21, 0.02).agrees).toBe(true);
		expect(judge(wanted, 1.23, 0.02).agrees).toBe(false);
	});

	it('reaches certified digits, keeps a bound, or is the same word', () => {
		expect(judge(figure({ published: '1000', digits: 5 }), 1000.001).agrees).toBe(true);
		expect(judge(figure({ published: '1000', digits: 7 }), 1000.001).agrees).toBe(false);
		expect(judge(figure({ published: '0.05', relation: 'below' }), 0.049).agrees).toBe(true);
		expect(judge(figure({ published: '0.05', relation: 'below' }), 0.051).agrees).toBe(false);
		expect(judge(figure({ published: 'met' }), 'met').agrees).toBe(true);
		expect(judge(figure({ published: 'met' }), 'undecided').agrees).toBe(false);
	});

	it('that is not a number never agrees', () => {
		for (const about of [{}, { digits: 3 }, { within: 1, published: null, recomputed: 1 }])
			expect(judge(figure(about), Number.NaN).agrees).toBe(false);
	});
});

it('has a last digit whose half is half a unit', () => {
	expect(halfUnit('12')).toBeCloseTo(0.5, 8);
	expect(halfUnit('1.20e-3')).toBeCloseTo(5e-6, 13);
	expect(digitsOf(1.001, 1)).toBeCloseTo(3, 9);
	expect(digitsOf(0, 0)).toBe(16);
});
