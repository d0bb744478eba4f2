import { platinumResistance, platinumTemperature } from '$lib/calc/tables/platinum';
import { isRefusal } from '$lib/calc/tables/refusal';
import { expect, it } from 'vitest';
import { readCases } from '../curves/digits';
import { argumentOf, expectPrinted, valueOf } from './cases';

// IEC 60751:2022, table of R(t) for 100 Ω at 0 °C, and the inverse of its equation; the cases say what was seen.
const cases = readCases('temperature.json');
const figures = (id: string) => cases.find((one) => one.id === id)?.expected ?? [];
const printed = figures('iec60751-pt100-table').filter(({ quantity }) => quantity.startsWith('R('));
const inverse = figures('iec60751-inverse');

it('knows all the points of both tables', () => {
	expect(printed).toHaveLength(17);
	expect(inverse).toHaveLength(9);
});

it.each(printed)('$quantity = $published ohm', (point) => {
	const resistance = valueOf(platinumResistance(argumentOf(point), 100));
	expectPrinted(resistance, point);
	expect(resistance).toBeCloseTo(Number(point.recomputed), 10);
});

it.each(inverse)('$quantity = $recomputed degC', (point) => {
	const temperature = valueOf(platinumTemperature(argumentOf(point), 100));
	expect(temperature).toBeCloseTo(Number(point.recomputed), 8);
});

it('has the mean coefficient 0.003851 per °C (IEC 60751, from memory, recomputed)', () => {
	const slope = (valueOf(platinumResistance(100, 1)) - 1) / 100;
	expect(slope.toFixed(6)).toBe('0.003851');
});

it('comes back to the same temperature within a nanokelvin all over both branches', () => {
	for (let t = -200; t <= 850; t += 0.25) {
		const back = valueOf(platinumTemperature(valueOf(platinumResistance(t, 1000)), 1000));
		expect(Math.abs(back - t)).toBeLessThan(1e-9);
	}
});

it.each([
	[() => platinumResistance(-200.1, 100), 't is outside -200 to 850 °C'],
	[() => platinumResistance(851, 100), 't is outside -200 to 850 °C'],
	[() => platinumTemperature(18, 100), 'r is outside 18.5151 to 390.486 Ω'],
	[() => platinumTemperature(391, 100), 'r is outside 18.5151 to 390.486 Ω'],
	[() => platinumTemperature(NaN, 100), 'r is not a finite number'],
	[() => platinumResistance(20, 0), 'r0 must be above zero'],
])('refuses what the standard does not cover', (compute, message) => {
	const answer = compute();
	expect(isRefusal(answer) && answer.message).toBe(message);
});
