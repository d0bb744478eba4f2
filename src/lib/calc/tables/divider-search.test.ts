import { expect, it } from 'vitest';
import { leastSpentMs } from '../../../../tests/support/spent';
import { doubled, singles, type Arm } from './arms';
import { judge, objection, type Divider, type DividerQuestion } from './divider-question';
import { findDividers } from './divider-search';
import { isRefusal } from './refusal';

function found(question: DividerQuestion): Divider[] {
	const answer = findDividers(question);
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer;
}

function parts(question: DividerQuestion): { single: Arm[]; twice: Arm[] } {
	const single = singles(question);
	if (isRefusal(single)) throw new Error(single.message);
	return { single, twice: question.doubled ? doubled(single) : [] };
}

/** Every divider there is, judged one by one. */
function all(question: DividerQuestion): Divider[] {
	const { single, twice } = parts(question);
	const pairs = single.flatMap((upper) => [...single, ...twice].map((lower) => [upper, lower]));
	const more = twice.flatMap((upper) => single.map((lower) => [upper, lower]));
	return [...pairs, ...more]
		.map(([upper, lower]) => judge(question, upper!, lower!))
		.filter((divider) => Math.abs(divider.error) <= (question.error ?? 0.05))
		.filter((divider) => objection(question, divider) === undefined);
}

it('finds 39 kΩ over 11 kΩ for 15 V down to 3.3 V, which is exact in E24', () => {
	const [best] = found({ inputVoltage: 15, outputVoltage: 3.3, series: 'E24', highest: 1e5 });
	expect(best?.upper.resistance).toBe(39_000);
	expect(best?.lower.resistance).toBe(11_000);
	expect(best?.error).toBeCloseTo(0, 12);
});

it.each<[string, Partial<DividerQuestion>]>([
	['plain', {}],
	['one part doubled', { doubled: true }],
	['loaded', { load: 47_000, doubled: true }],
	['with limits', { sourceResistance: { atMost: 5_000 }, current: { atMost: 1e-3 } }],
	['cool', { dissipation: 2e-3, by: 'dissipation' }],
	['the finest series', { series: 'E192', lowest: 1e4, highest: 5e4, doubled: true }],
	['never above', { side: 'below', by: 'current' }],
	['as far off as is allowed', { error: 0.2, doubled: true, load: 1e5 }],
	['never below', { side: 'above', by: 'sourceResistance', doubled: true }],
])('finds what looking at every pair finds: %s', (_, more) => {
	const question = { inputVoltage: 12, outputVoltage: 2.5, series: 'E24', most: 30, ...more };
	const answer = found(question);
	const every = all(question);
	const by = question.by ?? 'error';
	const key = (divider: Divider) => Math.abs(divider[by]);
	const best = every.map(key).sort((a, b) => a - b);
	expect(answer).toHaveLength(Math.min(30, every.length));
	for (const [i, divider] of answer.entries()) expect(key(divider)).toBeCloseTo(best[i]!, 11);
});

it('lists dividers with their figures', () => {
	const question = { inputVoltage: 10, outputVoltage: 5, series: 'E12', most: 1, load: 10_000 };
	const [best] = found({ ...question, lowest: 1_000, highest: 20_000 });
	if (!best) throw new Error('Nothing found');
	const lower = 1 / (1 / best.lower.resistance + 1 / 10_000);
	expect(best.outputVoltage).toBeCloseTo((10 * lower) / (best.upper.resistance + lower), 12);
	expect(best.current).toBeCloseTo((10 - best.outputVoltage) / best.upper.resistance, 14);
	const heat = (10 - best.outputVoltage) ** 2 / best.upper.resistance;
	expect(best.dissipation).toBeCloseTo(
		Math.max(heat, best.outputVoltage ** 2 / best.lower.resistance),
		12,
	);
	expect(best.parts).toBe(2);
});

it('looks through the finest series, a part doubled and 20 % off allowed, within 100 ms', () => {
	const question = { inputVoltage: 15, outputVoltage: 3.3, error: 0.2, doubled: true };
	expect(leastSpentMs(() => found({ ...question, series: 'E192' }), 100)).toBeLessThan(100);
});

it('doubles a part only where a single one would not do', () => {
	const { single, twice } = parts({
		inputVoltage: 1,
		outputVoltage: 0.5,
		series: 'E24',
		doubled: true,
	});
	const values = new Set(single.map(({ resistance }) => resistance));
	expect(twice.some(({ resistance }) => values.has(resistance))).toBe(false);
	expect(twice.find(({ part, joined }) => part === 27_000 && joined === 'series')?.resistance).toBe(
		54_000,
	);
});

it('says what every pair in reach lacks', () => {
	const answer = findDividers({
		inputVoltage: 15,
		outputVoltage: 3.3,
		series: 'E24',
		sourceResistance: { atMost: 10e3 },
		current: { atMost: 1e-4 },
	});
	expect(isRefusal(answer) && answer.message).toMatch(
		/^No pair within 5 % meets every wish: \d+ draw another current, \d+ have another source/,
	);
	const coarse = findDividers({ inputVoltage: 3, outputVoltage: 1, series: 'E3', error: 0.001 });
	expect(isRefusal(coarse) && coarse.message).toBe('No pair of this series comes within 0.1 %');
});

it.each<[Partial<DividerQuestion>, string]>([
	[{ outputVoltage: 15 }, 'A divider gives less than its input'],
	[{ outputVoltage: -1 }, 'outputVoltage must be above zero'],
	[{ series: 'E25' }, 'There is no series E25'],
	[{ error: 0.5 }, 'An output more than 20 % off is no match'],
	[{ current: { atLeast: 2, atMost: 1 } }, 'The limits of current exclude each other'],
	[{ lowest: 1e3, highest: 1e2 }, 'Parts must lie within up to 12 decades, rising'],
	[{ load: 0 }, 'load must be above zero'],
])('refuses %j', (more, message) => {
	const answer = findDividers({ inputVoltage: 15, outputVoltage: 3.3, series: 'E24', ...more });
	expect(isRefusal(answer) && answer.message).toBe(message);
});
