import { expect, it } from 'vitest';
import { findParts, type FoundPart, type PartQuestion } from './part-search';
import { isRefusal } from './refusal';

function found(question: PartQuestion): FoundPart[] {
	const answer = findParts(question);
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer;
}

it.each([
	[1_234, 1_200, 1_240],
	[4_990, 5_100, 4_990],
	[15_915.5, 16_000, 15_800],
	[68_500, 68_000, 68_100],
	[3.3, 3.3, 3.32],
])('puts the nearest part to %f first', (wanted, e24, e96) => {
	// Picks from the tables of IEC 60063:2015, nearest by ratio; recomputed.
	expect(found({ wanted, series: 'E24' })[0]?.resistance).toBe(e24);
	expect(found({ wanted, series: 'E96' })[0]?.resistance).toBe(e96);
});

it('lists the next ones in order, and keeps bounds', () => {
	const list = found({ wanted: 28_205, series: 'E24', most: 4 });
	expect(list.map(({ resistance }) => resistance)).toEqual([27_000, 30_000, 33_000, 24_000]);
	expect(list[0]?.error).toBeCloseTo(27_000 / 28_205 - 1, 14);
	const above = found({ wanted: 28_205, series: 'E24', atLeast: 28_205, most: 1 });
	expect(above[0]?.resistance).toBe(30_000);
});

it('takes two equal parts where they come nearer', () => {
	const [best] = found({ wanted: 28_205, series: 'E24', doubled: true });
	expect(best).toMatchObject({ part: 56_000, joined: 'parallel', resistance: 28_000 });
});

it.each<[PartQuestion, string]>([
	[{ wanted: 0, series: 'E24' }, 'wanted must be above zero'],
	[{ wanted: 100, series: 'E24', atLeast: 101, atMost: 102 }, 'No part of this series lies within'],
	[{ wanted: 100, series: 'E5' }, 'There is no series E5'],
])('refuses %j', (question, message) => {
	const answer = findParts(question);
	expect(isRefusal(answer) && answer.message).toContain(message);
});
