import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { proseOf } from './prose';

function set(source: string) {
	const cell = { id: 'a', kind: 'text', source } as const;
	const cells = [cell, { id: 'b', kind: 'calculation', source: 'V_a = 3 V' } as const];
	return proseOf(cell, evaluate(cells, defaultOptions));
}

test('headings, lists, tables and figures become blocks', () => {
	expect(set('# Head\n\n1. one **{{V_a}}**\n\n| a |\n|--:|\n| `b` |')).toEqual([
		{ k: 'heading', level: 2, c: [{ k: 'text', t: 'Head' }] },
		{
			k: 'list',
			ordered: true,
			start: 1,
			items: [
				[
					{
						k: 'paragraph',
						c: [
							{ k: 'text', t: 'one ' },
							{ k: 'strong', c: [{ k: 'figure', number: '3', doubt: '', unit: 'V' }] },
						],
					},
				],
			],
		},
		{
			k: 'table',
			align: ['right'],
			head: [[{ k: 'text', t: 'a' }]],
			rows: [[[{ k: 'code', t: 'b' }]]],
		},
	]);
});

test('links lead to the web and to mail alone, and nothing is fetched', () => {
	const blocks = set(
		'[a](javascript:alert(1)) [b](file:///etc/passwd) ![c](https://x.example/p.png)',
	);
	const links = JSON.stringify(blocks).match(/"to":"[^"]*"/g) ?? [];
	for (const link of links) expect(link).toMatch(/"to":"(https?:|mailto:)/);
	expect(JSON.stringify(blocks)).not.toContain('"image"');
});

test('however deep lists, quotes and emphasis go, the blocks do not', () => {
	const deep = (value: unknown): number =>
		value !== null && typeof value === 'object'
			? 1 + Math.max(0, ...Object.values(value).map(deep))
			: 0;
	const lists = Array.from({ length: 12 }, (_, i) => `${'  '.repeat(i)}- item ${i}`).join('\n');
	for (const source of [
		lists,
		`${'> '.repeat(12)}deep`,
		`${'*a '.repeat(200)}${'*'.repeat(200)}`,
	]) {
		const blocks = set(source);
		expect(deep(blocks)).toBeLessThan(45);
		expect(JSON.stringify(blocks)).toMatch(/deep|item 9|a /);
	}
});

test('a text too long to be set stands as it was typed', () => {
	expect(set('x'.repeat(31_000))).toMatchObject([{ k: 'code' }]);
});
