import { describe, expect, it } from 'vitest';
import { compute } from '../support/notes';

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
