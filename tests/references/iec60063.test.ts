import { findCase } from '$lib/proof/cases';
import { describe, expect, it } from 'vitest';
import { compute, shown, spaced } from '../support/notes';

/** IEC 60063:2015, series tables: two or three digits of each value of a decade. */
const series = ['E3', 'E6', 'E12', 'E24', 'E48', 'E96', 'E192'].map((name) => {
	const { figures } = findCase(`iec60063-${name.toLowerCase()}`);
	return { name, values: figures.map(({ published }) => Number(published)) };
});

/** Values that `preferred`, `preferredAbove` and `preferredBelow` give for formulas, in ohm. */
function values(formulas: string[]): (number | null | undefined)[] {
	const { quantities, errors } = compute(formulas.map((f, i) => `q${i} = ${f}`).join('\n'));
	expect(errors).toEqual([]);
	return formulas.map((_, i) => quantities[`q${i}`]?.value);
}

describe('Preferred values (IEC 60063:2015)', () => {
	it('have data of all seven series', () => {
		expect(series.map(({ name, values: all }) => [name, all.length])).toEqual([
			['E3', 3],
			['E6', 6],
			['E12', 12],
			['E24', 24],
			['E48', 48],
			['E96', 96],
			['E192', 192],
		]);
	});

	describe.each(series)('of $name', ({ name, values: digits }) => {
		const scale = digits[0] ?? 10;
		const decade = digits.map((value) => Number(`${value}e3`));

		it('are found for themselves, also above and below', () => {
			for (const fn of ['preferred', 'preferredAbove', 'preferredBelow'])
				expect(values(decade.map((value) => `${fn}(${value} ohm, ${name})`))).toEqual(decade);
		});

		it('are the nearest by ratio on both sides of the geometric mean of neighbours', () => {
			const next = [...decade.slice(1), scale * 1e4];
			const mean = decade.map((value, i) => Math.sqrt(value * (next[i] ?? 0)));
			expect(values(mean.map((x) => `preferred(${x * 0.9999} ohm, ${name})`))).toEqual(decade);
			expect(values(mean.map((x) => `preferred(${x * 1.0001} ohm, ${name})`))).toEqual(next);
			expect(values(mean.map((x) => `preferredBelow(${x} ohm, ${name})`))).toEqual(decade);
			expect(values(mean.map((x) => `preferredAbove(${x} ohm, ${name})`))).toEqual(next);
		});

		it('keep their digits from pico to giga', () => {
			const last = digits.at(-1) ?? 0;
			for (const exponent of [-12, -9, -3, 0, 6, 9])
				expect(values([`preferred(${last}e${exponent}, ${name})`])).toEqual([
					Number(`${last}e${exponent}`),
				]);
		});
	});

	it('give 27 kΩ for the lower arm from 15 V down to 3.3 V (common practice, no source)', () => {
		const channel = 'Rexact = 100 kohm * 3.3 V / (15 V - 3.3 V)';
		expect(shown(channel)).toBe('28.2051 kΩ');
		expect(compute(channel).quantities.Rexact?.value).toBeCloseTo(28205.128205, 5);
		const { quantities } = compute(`${channel}\nR2 = preferred(Rexact, E24)`);
		expect(spaced(quantities.R2?.text ?? '')).toBe('27 kΩ');
		expect(quantities.R2?.value).toBe(27_000);
	});
});
