import { describe, expect, it } from 'vitest';
import { decide } from '$lib/calc/doubt/conformity';

/** A value with normal doubt and k = 2, below an upper limit or above a lower one. */
function side(margin: number, u: number) {
	return { margin, standardUncertainty: u, expandedUncertainty: 2 * u, dof: Infinity };
}

describe('An exact value', () => {
	const at = (margin: number, strict: boolean) =>
		decide([{ ...side(margin, 0), strict }], 'guarded');

	it('meets its limit with certainty or not at all', () => {
		expect(at(0.1, false)).toEqual({ verdict: 'met', margin: 0.1, probability: 1 });
		expect(at(-0.1, false)).toEqual({ verdict: 'not met', margin: -0.1, probability: 0 });
	});

	it('may lie on a limit that is not strict', () => {
		expect(at(0, false).verdict).toBe('met');
		expect(at(0, true).verdict).toBe('not met');
	});
});
