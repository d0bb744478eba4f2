import { describe, expect, it } from 'vitest';
import { decide } from '$lib/calc/doubt/conformity';
import { normalProbability, normalQuantile } from '$lib/calc/doubt/student';
import jcgm106 from '../data/jcgm106.json';
import { check, figuresOf, titleOf } from './published';

/** A value with normal doubt and k = 2, below an upper limit or above a lower one. */
function side(margin: number, u: number) {
	return { margin, standardUncertainty: u, expandedUncertainty: 2 * u, dof: Infinity };
}

describe(titleOf('j106-table1'), () => {
	it.each(figuresOf('j106-table1'))('$quantity', ({ quantity }) => {
		const p = Number(quantity.split('= ')[1]);
		check('j106-table1', quantity, normalQuantile(p));
		expect(decide([side(normalQuantile(p), 1)], 'simple').probability).toBeCloseTo(p, 12);
	});
});

describe(titleOf('j106-zener'), () => {
	it('keeps the sign of negative limits', () => {
		const { probability } = decide([side(-5.4 - -5.47, 0.05)], 'guarded');
		check('j106-zener', 'z', (-5.4 - -5.47) / 0.05);
		check('j106-zener', 'p_c', probability);
	});
});

describe(titleOf('j106-oil'), () => {
	it('takes both limits together', () => {
		const { probability } = decide([side(13.6 - 12.5, 1.8), side(16.3 - 13.6, 1.8)], 'simple');
		check('j106-oil', 'p_c', probability);
	});
});

describe(titleOf('j106-resistor'), () => {
	it('gives the share of a production out of tolerance', () => {
		const { probability } = decide([side(0.2, 0.12), side(0.2, 0.12)], 'simple');
		check('j106-resistor', 'fraction out of tolerance', 1 - probability);
	});
});

describe(titleOf('ilac-g8-table'), () => {
	// Printed are upper bounds of the probability of false acceptance at a guard band of so many U.
	const bands = [3, 1.5, 1, 0.83, 0];

	it.each(figuresOf('ilac-g8-table').map((figure, i) => ({ ...figure, band: bands[i]! })))(
		'$quantity $published',
		({ band, published, recomputed }) => {
			const { probability } = decide([side(band * 2, 1)], 'simple');
			expect(1 - probability).toBeLessThanOrEqual(Number(published));
			expect(normalProbability(-2 * band)).toBeCloseTo(recomputed, 12);
		},
	);
});

describe(titleOf('ilac-g8-worked'), () => {
	const { decisions } = jcgm106.cases.find((each) => each.id === 'ilac-g8-worked')!;
	const guarded = {
		pass: 'met',
		'conditional pass': 'undecided',
		'conditional fail': 'undecided',
		fail: 'not met',
	} as const;

	it.each(decisions!)('$y V against 10 V is $non_binary', ({ y, simple, non_binary, p_c }) => {
		const of = (rule: 'simple' | 'guarded') => decide([side(10 - y, 0.15)], rule);
		expect(of('simple').verdict).toBe(simple === 'pass' ? 'met' : 'not met');
		expect(of('guarded').verdict).toBe(guarded[non_binary as keyof typeof guarded]);
		expect(of('guarded').probability).toBeCloseTo(p_c, 5);
	});
});

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
