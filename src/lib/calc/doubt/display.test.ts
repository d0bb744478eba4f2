import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { rounded } from './display';

/** JCGM 100:2008, 7.2.6, and what its rule gives at the edges. */
describe('A value beside its uncertainty', () => {
	it.each([
		[100.02147, 0.00035, 1, '100.02147', '0.00035'],
		[10.05762, 0.0279, 1, '10.058', '0.028'],
		[2.4112, 0.00361, 1e-3, '2411.2', '3.6'],
		[12.3456, 9.96, 1, '12', '10'],
		[12.3456, 0.996, 1, '12.3', '1.0'],
		[123456, 789, 1, '123460', '790'],
		[99.97, 26, 1, '100', '26'],
		[996, 123, 1, '1000', '120'],
		[4, 250, 1, '0', '250'],
		[-7, 123, 1, '-10', '120'],
		[-0.0004, 0.012, 1, '0.000', '0.012'],
		[0.09999999999999432, 0.03, 1, '0.100', '0.030'],
	])('of %d ± %d (unit %d) is %s ± %s', (value, u, factor, shown, doubt) => {
		expect(rounded(value, u, factor)).toMatchObject({ value: shown, uncertainty: doubt });
	});

	it('is not written without an uncertainty', () => {
		for (const u of [0, -1, NaN, Infinity]) expect(rounded(1, u)).toBeUndefined();
		expect(rounded(NaN, 1)).toBeUndefined();
	});

	it('stays within half a unit of its last place', () => {
		fc.assert(
			fc.property(
				fc.double({ min: -1e9, max: 1e9, noNaN: true }),
				fc.double({ min: 1e-9, max: 1e9, noNaN: true }),
				(value, u) => {
					const { value: shown, uncertainty, place } = rounded(value, u)!;
					const half = 0.5 * 10 ** place * (1 + 1e-6);
					expect(Math.abs(Number(shown) - value)).toBeLessThanOrEqual(
						half + 1e-15 * Math.abs(value),
					);
					expect(Math.abs(Number(uncertainty) - u)).toBeLessThanOrEqual(half * 10);
					expect(
						uncertainty.replace(/[.-]/g, '').replace(/^0+/, '').replace(/0*$/, '').length,
					).toBeLessThan(3);
				},
			),
		);
	});
});
