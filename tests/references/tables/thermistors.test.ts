import { isRefusal } from '$lib/calc/tables/refusal';
import {
	ntcResistance,
	ntcTemperature,
	steinhartResistance,
	steinhartTemperature,
} from '$lib/calc/tables/thermistors';
import { expect, it } from 'vitest';
import { valueOf } from './cases';

it('gives the temperature of problem 8.5 in Figliola and Beasley, with the zero of Celsius it uses', () => {
	// Theory and Design for Mechanical Measurements: 20 kΩ at 100 °C, beta 3650 K, 500 Ω. Printed: 598.7 K, 325.7 °C,
	// with 273 for the zero of the Celsius scale. Source seen, recomputed.
	expect(valueOf(ntcTemperature(500, 20_000, 373, 3650)).toFixed(1)).toBe('598.7');
	// The same with 273.15, recomputed: the book's zero costs 0.2 °C.
	const exact = valueOf(ntcTemperature(500, 20_000, 373.15, 3650));
	expect(exact).toBeCloseTo(599.08, 2);
	expect(exact - 273.15).toBeCloseTo(325.93, 2);
});

it('beta equation and its inverse undo each other', () => {
	for (let t = 200; t < 450; t += 7) {
		const r = valueOf(ntcResistance(t, 10_000, 298.15, 3977));
		expect(valueOf(ntcTemperature(r, 10_000, 298.15, 3977))).toBeCloseTo(t, 10);
	}
});

// Coefficients of a common 10 kΩ thermistor, from memory; no source. Only the round trip is checked with them.
const [a, b, c] = [1.129241e-3, 2.341077e-4, 8.775468e-8];

it('Steinhart-Hart equation and its inverse undo each other, with c above, at and below zero', () => {
	for (const third of [c, 0, -1e-8])
		for (let t = 220; t < 420; t += 7) {
			const r = valueOf(steinhartResistance(t, a, b, third));
			expect(valueOf(steinhartTemperature(r, a, b, third))).toBeCloseTo(t, 10);
		}
});

it('with c = 0 the Steinhart-Hart equation is the beta equation', () => {
	const beta = 3977;
	const first = 1 / 298.15 - Math.log(10_000) / beta;
	expect(valueOf(steinhartTemperature(4_321, first, 1 / beta, 0))).toBeCloseTo(
		valueOf(ntcTemperature(4_321, 10_000, 298.15, beta)),
		10,
	);
});

it.each([
	[() => ntcResistance(0, 10_000, 298, 3977), 't must be above zero'],
	[() => ntcTemperature(-5, 10_000, 298, 3977), 'r must be above zero'],
	[() => ntcTemperature(1e-9, 10_000, 298, 3977), 'No temperature gives so low a resistance'],
	[() => ntcResistance(300, 10_000, 298, NaN), 'beta is not a finite number'],
	[() => steinhartResistance(300, a, -b, c), 'b must be above zero: resistance falls'],
	[() => steinhartTemperature(10_000, -1, b, c), 'These coefficients give no temperature'],
	[() => steinhartResistance(300, a, 1e-9, 0), 'These coefficients give no resistance'],
])('refuses what has no answer', (compute, message) => {
	const answer = compute();
	expect(isRefusal(answer) && answer.message).toContain(message);
});
