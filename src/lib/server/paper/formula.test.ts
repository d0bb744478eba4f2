import { expect, test } from 'vitest';
import { formulaTex } from '$lib/calc/tex';
import { functions } from '$lib/calc/functions/registry';
import { parseLine } from '$lib/calc/language/parse-line';
import { formulaOf, type Formula } from './formula';

/** All characters of a formula, in their order. */
function charactersOf(formula: Formula | undefined): string {
	return JSON.stringify(formula ?? null, (key, value: unknown) => (key === 'k' ? undefined : value))
		.match(/"t":"(?:[^"\\]|\\.)*"/g)!
		.map((text) => JSON.parse(text.slice(4)) as string)
		.join('');
}

test('a fraction, a root and scripts keep their parts', () => {
	expect(formulaOf('\\frac{a}{\\sqrt[3]{b_{\\text{x}}^2}}', true)).toEqual({
		k: 'fraction',
		c: [
			{ k: 'sign', t: 'a', style: 'usual' },
			{
				k: 'root',
				c: [
					{
						k: 'scripts',
						base: { k: 'sign', t: 'b', style: 'usual' },
						low: { k: 'words', t: 'x' },
						high: { k: 'number', t: '2' },
					},
					{ k: 'number', t: '3' },
				],
			},
		],
	});
});

test.each([
	['\\sum_{i=1}^{n} x_i', '∑i=1nxi'],
	['\\overset{!}{=}', '=!'],
	['\\underbrace{a+b}_{c}', 'a+bunderbracec'],
	[
		'\\begin{cases} 1 & \\text{if } a < 3 \\\\ 2 & \\text{otherwise} \\end{cases}',
		'{1if a<32otherwise',
	],
	['\\left.\\frac{a}{b}\\right|_0', 'ab|0'],
	['\\operatorname{preferred}(x)', 'preferred(x)'],
])('%s loses nothing', (tex, characters) => {
	expect(charactersOf(formulaOf(tex, true)).replaceAll('∣', '|').replaceAll('\u00a0', ' ')).toBe(
		characters,
	);
});

test('what KaTeX does not take, and what is too long or too deep, is no formula', () => {
	for (const tex of [
		'\\frac{a',
		'\\nothing',
		'\\text{#panic()}',
		'x'.repeat(7000),
		`${'\\sqrt{'.repeat(40)}x${'}'.repeat(40)}`,
		`${'{'.repeat(5000)}${'}'.repeat(5000)}`,
		'\\def\\a{\\a\\a}\\a',
	])
		expect(formulaOf(tex, false), tex.slice(0, 20)).toBeUndefined();
});

test('commands that name addresses, styles or HTML lead nowhere', () => {
	const tex = '\\href{javascript:alert(1)}{x} \\htmlStyle{color:red}{y} \\includegraphics{z}';
	expect(JSON.stringify(formulaOf(tex, false) ?? null)).not.toMatch(/javascript|color:red/);
});

test('every example of the handbook can be set', () => {
	let set = 0;
	for (const { examples } of functions.values())
		for (const { source } of examples)
			for (const line of source.split('\n')) {
				const { body } = parseLine(line);
				if (!body) continue;
				expect(formulaOf(formulaTex(body), false), line).toBeDefined();
				set += 1;
			}
	expect(set).toBeGreaterThan(60);
});
