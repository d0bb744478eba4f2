import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '../evaluate';
import type { Cell, Sweep } from '../results';

const divider = [
	'Vmax = 32 V',
	'Vref = normal(2.5 V, 1.25 mV)',
	'R1 = tolerance(470 kohm, 0.1 %)',
	'R2 = tolerance(38.3 kohm, 0.1 %)',
	'Vadc = Vmax * R2 / (R1 + R2)',
];

function note(lines: readonly string[], curve: string, requirement = ''): Cell[] {
	return [
		{ id: 'a', kind: 'calculation', source: lines.join('\n') },
		{ id: 'q', kind: 'requirement', source: requirement },
		{ id: 'c', kind: 'curve', source: curve },
	];
}

function drawn(lines: readonly string[], curve: string, requirement?: string): Sweep {
	const { sweeps, errors } = evaluate(note(lines, curve, requirement), defaultOptions);
	expect(errors).toEqual([]);
	return sweeps![0]!;
}

test('a divider over its input is the closed formula, with the uncertainty of its arms and the worst of their corners', () => {
	const { x, series, unit } = drawn(divider, 'Vadc over Vmax from 0 V to 40 V in 81 points');
	const { values, expandedUncertainties, worstCase } = series[0]!;
	expect([x.length, x[0], x[1], x.at(-1), unit]).toEqual([81, 0, 0.5, 40, 'V']);
	// V R2/(R1+R2): both arms rectangular of relative half-width a, so u = V k (1 − k) a √(2/3), k = R2/(R1+R2).
	const k = 38.3 / 508.3;
	x.forEach((v, i) => {
		const expanded = 1.959963984540054 * v * k * (1 - k) * 0.001 * Math.sqrt(2 / 3);
		const [upper, lower] = [v / (1 + 469.53 / 38.3383), v / (1 + 470.47 / 38.2617)];
		expect(values[i]).toBeCloseTo(v * k, 12);
		expect(expandedUncertainties![i]).toBeCloseTo(expanded, 8);
		expect(worstCase!.upper[i]).toBeCloseTo(upper, 12);
		expect(worstCase!.lower[i]).toBeCloseTo(lower, 12);
	});
});

test('every point is what the note says with that value written in', () => {
	const lines = (ra: string) => [
		`Ra = tolerance(${ra}, 1 %)`,
		'Rb = tolerance(preferred(value(Ra) / 7, E24), 1 %)',
		'correlated(Ra, Rb, 0.4)',
		'gain(r1, r2) = r2 / (r1 + r2)',
		'k = gain(Ra, Rb)',
		'Vin = normal(10 V, 20 mV)',
		'Vout = Ra > 3 kohm ? Vin * k : 2 Vin * k',
		'limit1 = 0.12 * Vin',
	];
	const requirement = 'Vout <= limit1';
	const curve = 'Vout over Ra from 1 kohm to 10 kohm in 10 points';
	const { x, series, limits } = drawn(lines('4.7 kohm'), curve, requirement);
	x.forEach((ohms, i) => {
		const plain = evaluate(note(lines(`${ohms} ohm`), '', requirement), {
			...defaultOptions,
			detail: 'all',
		});
		const { value, expandedUncertainty, worstCase } = plain.quantities.Vout!;
		expect(series[0]!.values[i]).toBeCloseTo(value!, 12);
		expect(series[0]!.expandedUncertainties![i]).toBeCloseTo(expandedUncertainty!, 12);
		expect(series[0]!.worstCase!.upper[i]).toBeCloseTo(worstCase!.upper, 12);
		const judged = plain.requirements[0]!;
		expect(limits[0]!.upper).toEqual([expect.closeTo(judged.upper!, 12)]);
		const inside = limits[0]!.stretches.find(({ from, to }) => from <= ohms && ohms <= to)!;
		expect(inside.verdict).toBe(judged.verdict);
	});
});

test('limits are crossed, and verdicts turn, where the closed formula says', () => {
	const curve = 'Vadc over Vmax from 0 V to 40 V';
	const { limits } = drawn(divider, curve, 'Vadc <= 0.98 * Vref  # room above');
	const [limit] = limits;
	const k = 38.3 / 508.3;
	const [crossing, ...others] = limit!.crossings;
	expect(others).toEqual([]);
	expect(crossing).toMatchObject({ limit: 'upper', text: '32.515\u00a0V' });
	expect(crossing!.x).toBeCloseTo(2.45 / k, 6);
	// The distance 0.98 Vref − k V has u² = (0.98 · 1.25 mV)² + (V k (1 − k) a)² · 2/3: it equals U at both ends of the doubt.
	const z = 1.959963984540054 ** 2;
	const a = k * k - z * (2 / 3) * (k * (1 - k) * 0.001) ** 2;
	const c = 2.45 ** 2 - z * (0.98 * 1.25e-3) ** 2;
	const root = Math.sqrt((2.45 * k) ** 2 - a * c);
	const [first, second] = [(2.45 * k - root) / a, (2.45 * k + root) / a];
	expect(limit!.stretches.map(({ verdict, from, to }) => [verdict, from, to])).toEqual([
		['met', 0, expect.closeTo(first, 6)],
		['undecided', expect.closeTo(first, 6), expect.closeTo(second, 6)],
		['not met', expect.closeTo(second, 6), 40],
	]);
	expect(limit).toMatchObject({
		name: 'Vadc',
		lower: null,
		upper: [2.45],
		upperText: '2.45\u00a0V',
	});
	expect(limit!.text).toBe(
		'Met from 0\u00a0V to 32.458\u00a0V, undecided from 32.458\u00a0V to 32.573\u00a0V, not met from 32.573\u00a0V to 40\u00a0V',
	);
});

test('an undecided stretch narrower than the points stand apart is found all the same', () => {
	const { limits } = drawn(divider, 'Vadc over Vmax from 0 V to 40 V in 2 points', 'Vadc < 2.45 V');
	expect(limits[0]!.stretches.map(({ verdict }) => verdict)).toEqual([
		'met',
		'undecided',
		'not met',
	]);
});

test('several quantities, steps of equal ratio, a range of names, a comment', () => {
	const lines = [
		'fmin = 10 Hz',
		'f = 1 kHz',
		'fc = 1 kHz',
		'low = 1 / (1 + (f/fc)^2)',
		'high = 1 - low',
	];
	const { x, series, logarithmic, description, over, unit, shown } = drawn(
		lines,
		'low, high over f from fmin to 100 kHz logarithmic in 5 points # both halves',
		'low <= 1\nhigh >= 0',
	);
	expect(x).toEqual([10, 100, 1000, 10000, 100000]);
	expect([logarithmic, description, unit]).toEqual([true, 'both halves', '1']);
	expect(over).toEqual({
		name: 'f',
		unit: 'Hz',
		shown: { factor: 0.001, unit: 'kHz' },
		present: 1000,
		presentText: '1\u00a0kHz',
	});
	expect(shown).toEqual({ factor: 1, unit: '' });
	expect(series.map(({ name, values }) => [name, values[2]])).toEqual([
		['low', 0.5],
		['high', 0.5],
	]);
	expect(series.every((one) => !one.expandedUncertainties && !one.worstCase)).toBe(true);
});

test('points without a value are left out and told', () => {
	const { series, remarks } = drawn(
		['Vx = 2 V', 'k = sqrt(Vx / (1 V) - 1)'],
		'k over Vx from 0 V to 3 V in 4 points',
	);
	expect(series[0]!.values).toEqual([null, 0, 1, expect.closeTo(Math.SQRT2, 12)]);
	expect(remarks).toEqual([
		expect.stringMatching(/^1 point has no value, the first at Vx = 0\u00a0V\. ./),
	]);
});
