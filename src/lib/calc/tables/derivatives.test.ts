import { expect, it } from 'vitest';
import { quantisation, settling } from './conversion';
import { level, ratioOf } from './decibels';
import { johnson } from './noise';
import { platinumResistance, platinumTemperature } from './platinum';
import { isRefusal, type Refusal } from './refusal';
import {
	ntcResistance,
	ntcTemperature,
	steinhartResistance,
	steinhartTemperature,
} from './thermistors';
import { thermocoupleTemperature, thermocoupleVoltage } from './thermocouples';
import type { Worked } from './worked';

function worked(answer: Worked | Refusal): Worked {
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer;
}

const [a, b, c] = [1.129241e-3, 2.341077e-4, 8.775468e-8];

it.each<[string, (...args: number[]) => Worked | Refusal, number[]]>([
	['platinum resistance above zero', (t, r0) => platinumResistance(t, r0), [140, 100]],
	['platinum resistance below zero', (t, r0) => platinumResistance(t, r0), [-140, 100]],
	['platinum temperature above zero', (r, r0) => platinumTemperature(r, r0), [1_480, 1_000]],
	['platinum temperature below zero', (r, r0) => platinumTemperature(r, r0), [480, 1_000]],
	['voltage of type K', (t) => thermocoupleVoltage('K', t), [140]],
	['voltage of type T', (t) => thermocoupleVoltage('T', t), [-140]],
	['temperature of type N', (e) => thermocoupleTemperature('N', e), [17]],
	['beta resistance', (t, r, t0, beta) => ntcResistance(t, r, t0, beta), [310, 1e4, 298, 3900]],
	['beta temperature', (r, r0, t0, beta) => ntcTemperature(r, r0, t0, beta), [7e3, 1e4, 298, 3900]],
	[
		'Steinhart temperature',
		(r, ...k) => steinhartTemperature(r, k[0]!, k[1]!, k[2]!),
		[7e3, a, b, c],
	],
	[
		'Steinhart resistance',
		(t, ...k) => steinhartResistance(t, k[0]!, k[1]!, k[2]!),
		[310, a, b, c],
	],
	['thermal noise', (r, t, width) => johnson(r, t, width), [1e4, 300, 1e3]],
	['a level of amplitudes', (x, reference) => level(x, reference, 'amplitude'), [3, 2]],
	['a level of powers', (x, reference) => level(x, reference, 'power'), [3, 1e-3]],
	['a ratio', (x) => ratioOf(x, 'amplitude'), [7]],
	['quantisation', (vref) => quantisation(vref, 12), [3.3]],
])('derivatives of %s are those of its values', (_, of, args) => {
	const { derivatives } = worked(of(...args));
	expect(derivatives).toHaveLength(args.length);
	for (const [i, derivative] of derivatives.entries()) {
		const step = args[i]! * 1e-5;
		const moved = (by: number) => worked(of(...args.with(i, args[i]! + by))).value;
		const slope = (moved(step) - moved(-step)) / (2 * step);
		expect(Math.abs(slope / derivative - 1)).toBeLessThan(1e-6);
	}
});

it('derivatives of the settling time are those of its values', () => {
	const { value, derivatives } = worked(settling(1e4, 1e-11, 12, 0.5));
	const by = (answer: Worked | Refusal) => worked(answer).value - value;
	expect(by(settling(1.01e4, 1e-11, 12, 0.5))).toBeCloseTo(derivatives[0]! * 100, 16);
	expect(by(settling(1e4, 1.01e-11, 12, 0.5))).toBeCloseTo(derivatives[1]! * 1e-13, 16);
	expect(by(settling(1e4, 1e-11, 13, 0.5))).toBeCloseTo(derivatives[2]!, 16);
	expect(by(settling(1e4, 1e-11, 12, 0.500001)) / 1e-6 / derivatives[3]!).toBeCloseTo(1, 5);
});
