import { describe, expect, test } from 'vitest';
import type { Requirement } from '$lib/calc/results';
import { likelihood } from './probability';

const base = { verdict: 'met', guardBand: { lower: null, upper: 1 } } as Requirement;
const of = (probability: number, verdict: Requirement['verdict'] = 'met') =>
	likelihood({ ...base, probability, verdict })?.replace('\u00a0', ' ');

describe('how likely a requirement is kept', () => {
	test('a probability is a percentage, with a decimal near certainty', () => {
		expect(of(0.5, 'undecided')).toBe('50 % likely kept');
		expect(of(0.9952, 'undecided')).toBe('99.5 % likely kept');
		expect(of(0.9795)).toBe('98 % likely kept');
		expect(of(0.0007, 'not met')).toBe('0.1 % likely kept');
	});

	test('what is as good as certain is not told, unless the verdict leaves it open', () => {
		expect(of(1)).toBeUndefined();
		expect(of(0.9998)).toBeUndefined();
		expect(of(1e-9, 'not met')).toBeUndefined();
		expect(of(0.9998, 'undecided')).toBe('over 99.9 % likely kept');
		expect(of(0, 'undecided')).toBe('under 0.1 % likely kept');
	});

	test('an exact value has no likelihood', () => {
		const { guardBand, ...exact } = { ...base, probability: 0 };
		expect(guardBand).toBeDefined();
		expect(likelihood(exact)).toBeUndefined();
	});
});
