import { expect, test } from 'vitest';
import { linearTicks, logarithmicTicks } from './ticks';

const texts = (ticks: readonly { text: string }[]) => ticks.map(({ text }) => text);

test('ticks are round numbers within the range', () => {
	expect(texts(linearTicks(0, 40, 8))).toEqual([
		'0',
		'5',
		'10',
		'15',
		'20',
		'25',
		'30',
		'35',
		'40',
	]);
	expect(texts(linearTicks(0, 1, 5))).toEqual(['0', '0.2', '0.4', '0.6', '0.8', '1']);
	expect(texts(linearTicks(-40, 85, 5))).toEqual([
		'\u221240',
		'\u221220',
		'0',
		'20',
		'40',
		'60',
		'80',
	]);
	expect(texts(linearTicks(2.4, 2.46, 3))).toEqual(['2.4', '2.42', '2.44', '2.46']);
	expect(texts(linearTicks(5, 5, 4))).toEqual(['5']);
});

test('an axis of equal ratios has its decades, and more where they are few', () => {
	expect(texts(logarithmicTicks(10, 1e6, 6))).toEqual([
		'10',
		'100',
		'1000',
		'10\u202f000',
		'100\u202f000',
		'1\u202f000\u202f000',
	]);
	expect(texts(logarithmicTicks(1, 100, 8))).toEqual(['1', '2', '5', '10', '20', '50', '100']);
	expect(texts(logarithmicTicks(2, 8, 4))).toEqual(['2', '4', '6', '8']);
	expect(texts(logarithmicTicks(1, 1e12, 6))).toHaveLength(7);
});
