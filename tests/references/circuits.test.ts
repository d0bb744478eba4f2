import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compute } from '../support/notes';

interface Row {
	quantity: string;
	formula: string;
	/** Printed figure, null where the source prints none. */
	published: string | null;
	recomputed: number;
	confirmed: string;
}

interface Case {
	id: string;
	title: string;
	source: { document: string; edition: string; locator: string };
	/** Where print and recomputation disagree, why. */
	note?: string;
	before?: string;
	rows: Row[];
}

const { cases } = JSON.parse(
	readFileSync(new URL('./data/circuits.json', import.meta.url), 'utf8'),
) as { cases: Case[] };

/** Printed with a slip: the source's own formula gives another value, which is what is tested. */
const slips = new Set(['adc-settling-se t, N = 12']);

/** Whether a value rounds to the printed figure. */
function agrees(value: number, published: string): boolean {
	const places = published.split('.')[1]?.length ?? 0;
	return Math.abs(value - Number(published)) <= 0.5000001 * 10 ** -places;
}

describe.each(cases)('$title ($source.document)', ({ id, before, rows }) => {
	it.each(rows)('$quantity is $recomputed ($confirmed)', (row) => {
		const { quantities, errors } = compute(`${before ?? ''}\nx = ${row.formula}`);
		expect(errors).toEqual([]);
		const value = quantities.x?.value ?? NaN;
		expect(Math.abs(value / row.recomputed - 1)).toBeLessThan(1e-10);
		if (row.published === null) return;
		expect(agrees(value, row.published)).toBe(!slips.has(`${id} ${row.quantity}`));
	});
});

describe('The code of a converter (common practice, no source)', () => {
	it.each([
		['code(0 V, 2.5 V, 12)', 0],
		['code(1.25 V, 2.5 V, 12)', 2048],
		['code(2.5 V, 2.5 V, 12)', 4095],
		['code(3 V, 2.5 V, 12)', 4095],
		['code(-1 V, 2.5 V, 12)', 0],
		['code(2.411 V, 2.5 V, 12)', 3950],
		['code(3 * lsb(2.5 V, 12), 2.5 V, 12)', 3],
		['code(1 V, 3.3 V, 10)', 310],
		['code(1 V, 3.3 V, 16)', 19859],
	])('%s is %i', (formula, code) => {
		expect(compute(`x = ${formula}`).quantities.x?.value).toBe(code);
	});

	it('is reached again from the voltage of each step', () => {
		const lines = Array.from(
			{ length: 256 },
			(_, i) => `c${i} = code(${i} * lsb(3.3 V, 8), 3.3 V, 8)`,
		);
		const { quantities } = compute(lines.join('\n'));
		for (let i = 0; i < 256; i++) expect(quantities[`c${i}`]?.value).toBe(i);
	});
});
