import { describe, expect, it } from 'vitest';
import { findSymbol, symbolTexts } from '$lib/calc/units/table';
import { compute } from '../support/notes';
import { hasProgram, printed } from '../support/programs';

// GNU Units 2.22 (Debian 12), whose table cites NIST SP 811 and the SI Brochure, as an independent calculator.
const present = hasProgram('units', 'units', 'The comparison with GNU Units');

/** What GNU Units calls a symbol otherwise than the language. */
const others: Readonly<Record<string, string>> = {
	h: 'hour',
	pH: 'picohenry',
	rad: 'radian',
	mrad: 'milliradian',
	urad: 'microradian',
	'%': 'percent',
};

const bases = ['kg', 'm', 's', 'A', 'K', 'cd', 'mol', 'bit'];

/** Numbers of many conversions in one run. */
function gnu(conversions: readonly (readonly [from: string, to: string])[]): number[] {
	const input = conversions.flat().join('\n') + '\n';
	const lines = printed('units', ['-t', '-q', '-o', '%.15g'], input).trim().split('\n');
	expect(lines).toHaveLength(conversions.length);
	return lines.map(Number);
}

function ours(formula: string): number {
	const { quantities, errors } = compute(`x = ${formula}`);
	expect(errors, formula).toEqual([]);
	return quantities.x?.value ?? NaN;
}

function expectClose(value: number, reference: number, what: string): void {
	expect(Math.abs(value - reference), `${what}: ${value} beside ${reference}`).toBeLessThanOrEqual(
		1e-12 * Math.abs(reference),
	);
}

/** Formulas in the words of both: the language, the same for GNU Units, and the unit of the answer for each. */
const formulas: [language: string, to: string, gnu: string, gnuTo: string][] = [
	['60 mi/h', 'm/s', '60 mile/hour', 'm/s'],
	['1 lb/ft^3', 'kg/m^3', '1 pound/ft^3', 'kg/m^3'],
	['1 lbf*ft', 'J', '1 lbf ft', 'J'],
	['1 gallon/min', 'L/min', '1 gallon/min', 'liter/min'],
	['1 oz/yd^2', 'g/m^2', '1 ounce/yd^2', 'g/m^2'],
	['30 psi', 'bar', '30 psi', 'bar'],
	['760 mmHg', 'atm', '760 mmHg', 'atm'],
	['1 eV / (1 boltzmann)', 'K', '1 eV/k', 'K'],
	['2000 mAh * 3.7 V', 'Wh', '2000 mA hour 3.7 V', 'W hour'],
	['0.5 * 47 uF * (12 V)^2', 'mJ', '0.5 47 uF (12 V)^2', 'mJ'],
	['sqrt(4 * boltzmann * 300 K * 10 kohm * 1 kHz)', 'uV', 'sqrt(4 k 300 K 10 kohm 1 kHz)', 'uV'],
	['1 / (2 * pi * 10 kohm * 100 nF)', 'Hz', '1/(2 pi 10 kohm 100 nF)', 'Hz'],
	['5 V / 2.2 kohm', 'mA', '5 V / 2.2 kohm', 'mA'],
	['98.6 degF', 'degC', 'tempF(98.6)', 'tempC'],
	['-40 degC', 'degF', 'tempC(-40)', 'tempF'],
	['300 K', 'degF', '300 K', 'tempF'],
	['10 mV/degC', 'mV/degF', '10 mV/K', 'mV/degF'],
	['1 deg', 'mrad', '1 degree', 'milliradian'],
	['15 arcsec', 'urad', '15 arcsec', 'microradian'],
	['3 week', 'h', '3 week', 'hour'],
	['25 mil', 'um', '25 mil', 'um'],
	['1 hp', 'kW', '1 horsepower', 'kW'],
	['12 byte', 'bit', '12 byte', 'bit'],
	['50 ppm', '%', '50 ppm', 'percent'],
];

describe.skipIf(!present)('GNU Units', () => {
	it('gives the same size of every unit symbol', () => {
		const symbols = [...symbolTexts()].map((text) => findSymbol(text)!);
		const coherent = symbols.map(({ dimension }) =>
			dimension.powers.flatMap((power, i) => (power === 0 ? [] : [`${bases[i]}^${power}`])),
		);
		const rows = symbols.map(({ text }, i) => {
			const name = others[text] ?? text;
			return [`1 ${name}`, coherent[i]!.join(' ') || '1'] as const;
		});
		const sizes = gnu(rows);
		symbols.forEach(({ text, offset }, i) => {
			const unit = coherent[i]!.map((power) => power.replace(/\^(-.*)$/, '^($1)')).join(' * ');
			// Of a temperature on a scale the size of its degree.
			const one = offset === 0 ? `1 ${text}` : `(1 ${text} - 0 ${text})`;
			expectClose(ours(`number(${one}, ${unit || 'rad'})`), sizes[i]!, text);
		});
	});

	it.each(formulas)('gives %s in %s as the language does', (formula, to, theirs, theirUnit) => {
		expectClose(ours(`${formula} to ${to}`), gnu([[theirs, theirUnit]])[0]!, formula);
	});
});
