import { describe, expect, it } from 'vitest';
import { evaluate } from '$lib/calc/evaluate';
import { findCase } from '$lib/proof/cases';
import { compute, spaced } from '../../support/notes';

/** Results of a published case, with budgets. */
function resultsOf(id: string) {
	const { lines = [], readings = [] } = findCase(id);
	return evaluate(
		[
			{ id: 'readings', kind: 'readings', columns: readings },
			{ id: 'lines', kind: 'calculation', source: lines.join('\n') },
		],
		{ coverage: 0.95, decisionRule: 'guarded', detail: 'all' },
	).quantities;
}

describe('Budgets of published cases', () => {
	it('list inputs whose sensitivity is zero with contribution zero (JCGM 100:2008, H.1)', () => {
		const { budget = [] } = resultsOf('gum-h1-first-order').lX!;
		for (const input of ['alphaS', 'thetaMean', 'cyclic'])
			expect(budget.find((row) => row.input === input)?.contribution, input).toBe(0);
	});

	it('keep the four degrees of freedom of readings taken together (JCGM 100:2008, H.2, recomputed)', () => {
		const quantities = resultsOf('gum-h2-approach1');
		for (const name of ['R', 'X', 'Z'])
			expect(quantities[name]?.degreesOfFreedom).toBeCloseTo(4, 9);
	});

	it('are written to the place of their uncertainty (EA-4/02, S3)', () => {
		const { text } = resultsOf('ea-s3').RX!;
		expect(spaced(text)).toMatch(/^10[ ]?000\.178 .*0\.016/);
	});

	it('keep their degrees of freedom where an exact value is added', () => {
		const { quantities } = compute('x = student(1, 0.1, 7)\ny = x + 5');
		expect(quantities.y?.degreesOfFreedom).toBeCloseTo(7, 12);
	});
});
