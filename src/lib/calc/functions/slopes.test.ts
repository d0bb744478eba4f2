import { expect, it } from 'vitest';
import { externalSlopes } from '../doubt/partials';
import { list, type Value } from '../values';
import { functions } from './registry';

const coefficients = [1.129241e-3, 2.341077e-4, 8.775468e-8];

/** Values of calls in SI units; each function with slopes of its own has at least one. */
const calls: [name: string, ...args: Value[]][] = [
	['settling', 10e3, 12e-12, 12],
	['settling', 10e3, 12e-12, 12, 0.25],
	['dB', 3.3],
	['dB', 3.3, 'power'],
	['dBV', 0.2],
	['dBm', 0.02],
	['fromdB', -12],
	['fromdB', -12, 'power'],
	['johnson', 10e3, 300, 1e4],
	['pt', 400, 100],
	['pt', 200, 1000],
	['ptTemperature', 140, 100],
	['ptTemperature', 480, 1000],
	['ntcBeta', 320, 10e3, 298.15, 3950],
	['ntcBetaTemperature', 4e3, 10e3, 298.15, 3950],
	['steinhart', 4e3, ...coefficients],
	['steinhartResistance', 320, ...coefficients],
	['thermocouple', 'K', 400],
	['thermocouple', 'T', 150, 296],
	['thermocoupleTemperature', 'N', 12e-3],
	['thermocoupleTemperature', 'S', 5e-3, 296],
	['polynomial', 1.7, 3, -2, 0.5, 0.25],
	['polynomial', -0.4, 3],
	['acosh', 2.5],
	['asinh', -0.3],
	['atanh', 0.7],
	['interpolate', 1.25, list(Float64Array.of(0, 1, 2, 4)), list(Float64Array.of(0, 1, 4, 5))],
	['interpolate', 3.5, list(Float64Array.of(4, 2, 1)), list(Float64Array.of(1, 5, 9)), 'cubic'],
];

it.each(calls)('the slopes of %s(%s, …) are those of its values', (name, ...args) => {
	const { compute, slopes } = functions.get(name)!;
	const places = args.flatMap((value, i) => (typeof value === 'number' ? [i] : []));
	// A number of bits is whole, so that no difference can be taken by it.
	const free = places.filter((place) => !(name === 'settling' && place === 2));
	const value = (numbers: Float64Array) => {
		const values = [...args];
		free.forEach((place, i) => (values[place] = numbers[i]!));
		return Number(compute(values));
	};
	const differences = externalSlopes(
		{ name, value },
		Float64Array.from(free, (i) => +args[i]!),
	);
	const own = slopes!(args);
	expect(own).toHaveLength(args.length);
	free.forEach((place, i) => {
		const scale = Math.max(Math.abs(differences[i]!), 1e-12 * Math.abs(Number(compute(args))));
		expect(Math.abs(own[place]! - differences[i]!) / scale, `value ${place + 1}`).toBeLessThan(
			1e-5,
		);
	});
	args.forEach((arg, i) => typeof arg === 'number' || expect(own[i]).toBe(0));
});

it('every function with slopes of its own is among these calls', () => {
	const tried = new Set(calls.map(([name]) => name));
	const all = [...functions.values()].filter(({ slopes }) => slopes).map(({ name }) => name);
	expect(all.filter((name) => !tried.has(name))).toEqual([]);
});
