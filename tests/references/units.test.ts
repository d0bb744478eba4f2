import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compute } from '../support/notes';

interface Row {
	quantity: string;
	formula: string;
	/** Printed digits; of SP 811 from memory, each recomputed with an independent table of units. */
	published: string;
	recomputed: number;
	confirmed: string;
}

interface Group {
	id: string;
	source: { document: string; edition: string; locator: string };
	rows: Row[];
}

const { cases } = JSON.parse(
	readFileSync(new URL('./data/units.json', import.meta.url), 'utf8'),
) as {
	cases: Group[];
};

describe.each(cases)('$source.document, $source.locator', ({ rows }) => {
	it.each(rows)('$quantity is $published ($confirmed)', ({ formula, published, recomputed }) => {
		const { quantities, errors } = compute(`x = ${formula}`);
		expect(errors).toEqual([]);
		const value = quantities.x?.value ?? NaN;
		// The recomputed figures are kept to twelve digits.
		expect(Math.abs(value - recomputed)).toBeLessThanOrEqual(Math.abs(recomputed) * 1e-11 + 1e-10);
		const [mantissa = '', exponent = '0'] = published.split('E');
		const places = mantissa.split('.')[1]?.length ?? 0;
		const halfDigit = 0.5000001 * 10 ** (Number(exponent) - places);
		expect(Math.abs(value - Number(published))).toBeLessThanOrEqual(halfDigit);
	});
});
