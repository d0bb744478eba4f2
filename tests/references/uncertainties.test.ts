import * as fc from 'fast-check';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { compute } from '../support/notes';
import { hasPythonModule, printed, python } from '../support/programs';
import { estimates, smooth } from './doubt/formulas';
import { inLanguage, inPython } from './doubt/formula-text';

// python3-uncertainties 3.1.6 (Debian 12), linear propagation with derivatives of its own; numpy for its correlated values.
const whatFor = 'The comparison with uncertainties';
const present =
	hasPythonModule('uncertainties', 'python3-uncertainties', whatFor) &&
	hasPythonModule('numpy', 'python3-numpy', whatFor);
const script = fileURLToPath(new URL('./propagate.py', import.meta.url));

interface Case {
	/** Value and standard uncertainty, in SI units for Python. */
	inputs: Record<string, [value: number, u: number]>;
	correlations?: [string, string, number][];
	formulas: string[];
}

function theirs(of: Case): [value: number, u: number][] {
	return JSON.parse(printed(python, [script], JSON.stringify(of))) as [number, number][];
}

/** Value and standard uncertainty of each formula, named f0, f1, …, after some lines. */
function ours(before: string[], formulas: string[]): [value: number, u: number][] {
	const lines = formulas.map((formula, i) => `f${i} = ${formula}`);
	const { quantities, errors } = compute([...before, ...lines].join('\n'));
	expect(errors).toEqual([]);
	return formulas.map((_, i) => {
		const { value, standardUncertainty = 0 } = quantities[`f${i}`]!;
		return [value ?? NaN, standardUncertainty];
	});
}

function expectClose(mine: [number, number], other: [number, number], what: string): void {
	const [value, u] = mine;
	const text = `${what}: ${value} ± ${u} beside ${other[0]} ± ${other[1]}`;
	expect(Math.abs(value - other[0]), text).toBeLessThanOrEqual(1e-12 * (1 + Math.abs(other[0])));
	expect(Math.abs(u - other[1]), text).toBeLessThanOrEqual(1e-9 * (1e-3 + other[1]));
}

/** Formulas of the trade, in the words of both. Inputs below; Python has them in SI units. */
const trade: [language: string, python: string][] = [
	['divider(Vin, Ra, Rb)', 'Vin * Rb / (Ra + Rb)'],
	['divider(Vin, Ra, Rb, Rl)', 'Vin / (1 + Ra * (1 / Rb + 1 / Rl))'],
	['parallel(Ra, Rb, Rl) to ohm', '1 / (1 / Ra + 1 / Rb + 1 / Rl)'],
	['Vin^2 / Ra to W', 'Vin**2 / Ra'],
	['1 / (2 * pi * Ra * Ca) to Hz', '1 / (2 * 3.141592653589793 * Ra * Ca)'],
	['settling(Ra, Ca, 12) to s', 'Ra * Ca * 13 * 0.6931471805599453'],
	['dB(Rb / Ra)', '20 * log10(Rb / Ra)'],
	['pt(dT + 60 degC, 100 ohm)', '100 * (1 + 3.9083e-3 * (dT + 60) - 5.775e-7 * (dT + 60)**2)'],
	[
		'ntcBeta(dT + 60 degC, Rb, 25 degC, 3950 K)',
		'Rb * exp(3950 * (1 / (dT + 333.15) - 1 / 298.15))',
	],
	['johnson(Ra, 300 K, 1 kHz) to V', 'sqrt(4 * 1.380649e-23 * 300 * Ra * 1000)'],
	['polynomial(Vin / (1 V), 1, 2, 3)', '1 + 2 * Vin + 3 * Vin**2'],
	['hypot(Ra, Rb) to ohm', 'hypot(Ra, Rb)'],
	['Vin * exp(-1 ms / (Ra * Ca))', 'Vin * exp(-1e-3 / (Ra * Ca))'],
	['lsb(Vin, 12) * 2048', 'Vin / 2'],
	['mean(Ra, Rb, Rl) to ohm', '(Ra + Rb + Rl) / 3'],
	['std(Ra, Rb) to ohm', 'sqrt((Ra - Rb)**2 / 2)'],
];
const lines = [
	'Vin = normal(12 V, 20 mV)',
	'Ra = normal(100 kohm, 300 ohm)',
	'Rb = normal(27 kohm, 90 ohm)',
	'Rl = normal(1 Mohm, 5 kohm)',
	'Ca = normal(10 nF, 0.2 nF)',
	'dT = normal(0 K, 0.15 K)',
];
const inputs: Case['inputs'] = {
	Vin: [12, 0.02],
	Ra: [1e5, 300],
	Rb: [27e3, 90],
	Rl: [1e6, 5e3],
	Ca: [1e-8, 2e-10],
	dT: [0, 0.15],
};

describe.skipIf(!present)('python3-uncertainties', () => {
	it('gives value and uncertainty of formulas of the trade', () => {
		const mine = ours(
			lines,
			trade.map(([language]) => language),
		);
		const others = theirs({ inputs, formulas: trade.map(([, text]) => text) });
		trade.forEach(([language], i) => expectClose(mine[i]!, others[i]!, language));
	});

	it('gives the same where inputs are correlated', () => {
		const mine = ours(
			[...lines, 'correlated(Ra, Rb, 0.8)', 'correlated(Vin, Ra, -0.3)'],
			trade.map(([language]) => language),
		);
		const others = theirs({
			inputs,
			correlations: [
				['Ra', 'Rb', 0.8],
				['Vin', 'Ra', -0.3],
			],
			formulas: trade.map(([, text]) => text),
		});
		trade.forEach(([language], i) => expectClose(mine[i]!, others[i]!, language));
	});

	it('gives value and uncertainty of 200 random formulas', () => {
		const { p, q, r } = estimates;
		const formulas = fc.sample(smooth, { numRuns: 200, seed: 2012 });
		const before = [`p = normal(${p}, 0.01)`, `q = normal(${q}, 0.02)`, `r = normal(${r}, 0.05)`];
		const mine = ours(before, formulas.map(inLanguage));
		const others = theirs({
			inputs: { p: [p, 0.01], q: [q, 0.02], r: [r, 0.05] },
			formulas: formulas.map(inPython),
		});
		formulas.forEach((formula, i) => expectClose(mine[i]!, others[i]!, inLanguage(formula)));
	});
});
