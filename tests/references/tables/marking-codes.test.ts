import { readBands, writeBands } from '$lib/calc/tables/colour-bands';
import { isRefusal } from '$lib/calc/tables/refusal';
import { toleranceOf } from '$lib/calc/tables/tolerance-letters';
import iec60062 from '$lib/proof/data/iec60062.json';
import { expect, it } from 'vitest';

// IEC 60062:2016; the data say which rows were seen in print and which are from memory.
interface Codes {
	id: string;
	table?: {
		colour: string;
		digit: number | null;
		multiplier_exponent: number;
		tolerance_percent_and_letter: string | null;
		tempco_ppm_per_K: number | null;
	}[];
	symmetric_percent?: Record<string, number>;
	asymmetric_percent?: Record<string, [number, number]>;
	examples?: { bands: string[]; ohm: number; tolerance_percent: number; tempco_ppm?: number }[];
}

const cases = iec60062.cases as unknown as Codes[];

function table<Key extends keyof Codes>(key: Key): NonNullable<Codes[Key]> {
	const found = cases.find((one) => one[key] !== undefined)?.[key];
	if (found === undefined) throw new Error(`No ${key}`);
	return found;
}

it('knows every tolerance letter', () => {
	const symmetric = Object.entries(table('symmetric_percent'));
	const lopsided = Object.entries(table('asymmetric_percent'));
	expect(symmetric.length + lopsided.length).toBe(18);
	for (const [letter, percent] of symmetric)
		expect(toleranceOf(letter)).toEqual({ lower: -percent / 100, upper: percent / 100 });
	for (const [letter, [lower, upper]] of lopsided)
		expect(toleranceOf(letter)).toEqual({ lower: lower / 100, upper: upper / 100 });
});

it.each(table('examples'))('bands $bands are $ohm ohm', (example) => {
	const read = readBands(example.bands);
	if (isRefusal(read)) throw new Error(read.message);
	expect(read.ohms).toBe(example.ohm);
	expect(read.tolerance).toBeCloseTo(example.tolerance_percent / 100, 15);
	if (example.tempco_ppm !== undefined)
		expect(read.drift).toBeCloseTo(example.tempco_ppm * 1e-6, 15);
	const written = writeBands(read.ohms, read);
	// 10 kΩ needs two digits only: what was written with three comes back with two.
	const wanted = example.ohm === 10_000 ? ['brown', 'black', 'orange', 'brown'] : example.bands;
	expect(written).toEqual(wanted);
});

it.each(table('table'))('$colour means what the table says', (row) => {
	const { colour, digit, multiplier_exponent: exponent, tempco_ppm_per_K: drift } = row;
	if (digit !== null)
		expect(readBands([colour, colour, 'black'])).toMatchObject({ ohms: digit * 11 });
	expect(readBands(['brown', 'black', colour])).toMatchObject({ ohms: Number(`10e${exponent}`) });
	const tolerance = row.tolerance_percent_and_letter?.split(' ')[0];
	const read = readBands(['brown', 'black', 'black', colour]);
	if (tolerance === undefined) expect(isRefusal(read)).toBe(true);
	else expect(read).toMatchObject({ tolerance: Number(tolerance) / 100 });
	const six = readBands(['brown', 'black', 'black', 'black', 'brown', colour]);
	if (drift === null) expect(isRefusal(six)).toBe(true);
	else expect(six).toMatchObject({ drift: Number(`${drift}e-6`) });
});
