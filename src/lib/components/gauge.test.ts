import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { gaugeScale } from './gauge';

const figure = fc.double({ min: -1e12, max: 1e12, noNaN: true });

describe('the scale of a limit gauge', () => {
	test('a value close below its limit stands visibly left of it', () => {
		const { value, upper } = gaugeScale({ value: 2.4112, lower: null, upper: 2.45 });
		expect((upper ?? 0) - value).toBeGreaterThan(0.15);
	});

	test('a value far below its limit is drawn from zero', () => {
		const { value, upper } = gaugeScale({ value: 1, lower: null, upper: 4 });
		expect(value / (upper ?? 1)).toBeCloseTo(0.25, 10);
	});

	test('a value far beyond two limits stands at the edge and says so', () => {
		expect(gaugeScale({ value: 99, lower: 1, upper: 2 })).toMatchObject({
			value: 0.97,
			beyond: 'right',
		});
	});

	test('all marks stay in the picture and on their side of each other', () => {
		fc.assert(
			fc.property(figure, figure, fc.boolean(), (value, limit, above) => {
				const scale = gaugeScale({
					value,
					lower: above ? null : limit,
					upper: above ? limit : null,
				});
				const at = (above ? scale.upper : scale.lower) ?? NaN;
				expect(at).toBeGreaterThan(0);
				expect(at).toBeLessThan(1);
				expect(scale.value).toBeGreaterThanOrEqual(0);
				expect(scale.value).toBeLessThanOrEqual(1);
				if (Math.abs(value - limit) > Math.max(1e-6 * Math.abs(limit), 1e-290)) {
					expect(Math.sign(scale.value - at)).toBe(Math.sign(value - limit));
				}
			}),
		);
	});

	test('the least number that there is makes no mark without a place', () => {
		const scale = gaugeScale({ value: 0, lower: -5e-324, upper: null });
		expect(scale.lower).toBeGreaterThan(0);
		expect(scale.lower).toBeLessThan(1);
	});

	test('a guard band lies before its limit, and the doubt on both sides of the value', () => {
		const scale = gaugeScale({
			value: 2.41,
			lower: null,
			upper: 2.45,
			expandedUncertainty: 0.004,
			guardBand: { lower: null, upper: 0.005 },
		});
		const [from, to] = scale.doubt!;
		expect(from).toBeLessThan(scale.value);
		expect(to).toBeGreaterThan(scale.value);
		expect(scale.guard.lower).toBeNull();
		expect(scale.guard.upper).toBeLessThan(scale.upper!);
		expect((to - from) / (scale.upper! - scale.guard.upper!)).toBeCloseTo(8 / 5, 9);
	});

	test('a value at its limit shows its doubt, however small that is beside the limit', () => {
		const { doubt } = gaugeScale({ value: 5, lower: 5, upper: null, expandedUncertainty: 0.001 });
		expect(doubt![1] - doubt![0]).toBeGreaterThan(0.1);
	});

	test('a value of zero in doubt stands inside the picture', () => {
		const scale = gaugeScale({ value: 0, lower: null, upper: 5, expandedUncertainty: 3.4 });
		expect(scale.beyond).toBeNull();
		expect(scale.doubt![0]).toBeGreaterThan(0);
	});

	test('doubt and guard bands stay in the picture', () => {
		const size = fc.double({ min: 0, max: 1e12, noNaN: true });
		fc.assert(
			fc.property(figure, figure, size, size, (value, lower, expandedUncertainty, width) => {
				const scale = gaugeScale({
					value,
					lower,
					upper: null,
					expandedUncertainty,
					guardBand: { lower: width, upper: null },
				});
				for (const at of [...(scale.doubt ?? []), scale.guard.lower ?? 0.5]) {
					expect(at).toBeGreaterThanOrEqual(0);
					expect(at).toBeLessThanOrEqual(1);
				}
			}),
		);
	});

	test('no limit, no span and no value break the scale', () => {
		const { value, lower, upper } = gaugeScale({ value: 0, lower: 0, upper: 0 });
		for (const at of [value, lower, upper]) {
			expect(at === null || Number.isFinite(at)).toBe(true);
		}
		expect(gaugeScale({ value: 0, lower: null, upper: 0 }).value).toBeGreaterThan(0);
	});
});
