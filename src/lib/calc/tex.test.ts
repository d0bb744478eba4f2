import katex from 'katex';
import { describe, expect, test } from 'vitest';
import { defaultOptions, evaluate } from './evaluate';
import { functions } from './functions/registry';
import { parseLine } from './language/parse-line';
import { formulaTex } from './tex';
import { symbolTex, unitTex } from './tex-words';

function tex(source: string): string {
	const { body, trouble } = parseLine(source);
	if (!body) throw new Error(trouble?.message);
	return formulaTex(body).replace(/\s+/g, ' ').trim();
}

/** Throws where KaTeX does not take it. */
function typesets(formula: string): string {
	return katex.renderToString(formula, { trust: false, strict: 'ignore', throwOnError: true });
}

describe('formulas as TeX', () => {
	test.each([
		['a / (b + c)', '\\frac{a}{b + c}'],
		['(a + b) * c', '\\left(a + b\\right) \\cdot c'],
		['a - (b - c)', 'a - \\left(b - c\\right)'],
		['-x ^ 2', '-x^{2}'],
		['(-x) ^ 2', '\\left(-x\\right)^{2}'],
		['(a / b) ^ 2', '\\left(\\frac{a}{b}\\right)^{2}'],
		['(3 V) ^ 2', '\\left(3\\,\\mathrm{V}\\right)^{2}'],
		['2 * -3', '2 \\cdot \\left(-3\\right)'],
		['sqrt(a ^ 2 + b ^ 2)', '\\sqrt{a^{2} + b^{2}}'],
		['a - -b * c', 'a - \\left(-b \\cdot c\\right)'],
		['cbrt(x)', '\\sqrt[3]{x}'],
		['log(x)', '\\ln\\left(x\\right)'],
		['log(x, 3)', '\\log_{3}\\left(x\\right)'],
		['2 * pi', '2 \\cdot \\pi'],
		['470 kohm', '470\\,\\mathrm{k\\Omega }'],
		['5 nV/sqrt(Hz)', '5\\,\\mathrm{nV/\\sqrt{Hz}}'],
		['1e-12 A', '1 \\times 10^{-12}\\,\\mathrm{A}'],
		['x to mV', 'x\\;\\text{in}\\;\\mathrm{mV}'],
		['parallel(a, b)', 'a \\parallel b'],
		['divider(x, a, b)', 'x \\cdot \\frac{b}{a + b}'],
		['a <= b', 'a \\le b'],
		['preferred(x, E96)', '\\operatorname{preferred}\\left(x,\\, \\text{E96}\\right)'],
		[
			'a < 3 ? 1 : a < 4 ? 2 : 3',
			'\\begin{cases} 1 & \\text{if } a < 3 \\\\ 2 & \\text{if } a < 4 \\\\ 3 & \\text{otherwise} \\end{cases}',
		],
	])('%s', (source, expected) => {
		expect(tex(source)).toBe(expected);
	});

	test('a symbol has its subscript upright and Greek letters by their names', () => {
		expect(symbolTex('V_adc')).toBe('V_{\\text{adc}}');
		expect(symbolTex('delta_gain')).toBe('\\delta _{\\text{gain}}');
		expect(symbolTex('gainError')).toBe('\\mathit{gainError}');
	});

	test('units are upright, with their powers', () => {
		expect(unitTex('m²/s')).toBe('\\mathrm{m^{2}/s}');
		expect(unitTex('°C')).toBe('\\mathrm{{^\\circ}C}');
	});

	test('figures stand in place of names, negative ones in brackets', () => {
		const source = 'a = -2 V\nb = 3 V\nc = b - a * 2';
		const { quantities } = evaluate([{ id: 'c', kind: 'calculation', source }], {
			...defaultOptions,
			detail: ['b', 'c'],
		});
		expect(quantities.c?.formula).toEqual({
			symbols: 'c = b - a \\cdot 2',
			figures: '3\\,\\mathrm{V} - \\left(-2\\,\\mathrm{V} \\cdot 2\\right)',
		});
		expect(quantities.b?.formula).toEqual({ symbols: 'b = 3\\,\\mathrm{V}' });
		expect(quantities.a?.formula).toBeUndefined();
	});

	test('a quantity in doubt has its formula beside its budget, whose numbers are written with their units', () => {
		const source = 'R_1 = tolerance(1 kohm, 1 %)\nV_1 = 2 mA * R_1';
		const { quantities } = evaluate([{ id: 'c', kind: 'calculation', source }], {
			...defaultOptions,
			detail: ['V_1'],
		});
		expect(quantities.V_1?.formula?.symbols).toContain('\\mathrm{mA}');
		expect(quantities.V_1?.texts?.standardUncertainty).toBe('12\u00a0mV');
		expect(quantities.V_1?.budget?.[0]?.texts).toEqual({
			value: '1\u00a0kΩ',
			standardUncertainty: '5.8\u00a0Ω',
			contribution: '12\u00a0mV',
			sensitivity: '2\u00a0mV/Ω',
		});
	});

	test('KaTeX sets every example of the handbook, with symbols and with figures', () => {
		const sources = [...functions.values()].flatMap(({ examples }) =>
			examples.map(({ source }) => source),
		);
		expect(sources.length).toBeGreaterThan(60);
		for (const source of sources) {
			for (const line of source.split('\n')) {
				const { body } = parseLine(line);
				if (body) expect(typesets(formulaTex(body)), line).toContain('<math');
			}
		}
	});

	test('characters that mean something to TeX are words in a text', () => {
		const { body } = parseLine('f("a{b}$&#%_^~c")');
		if (body) expect(typesets(formulaTex(body))).toContain('<math');
		expect(
			typesets(
				'\\text{\\textbackslash{}\\textasciicircum{}\\textasciitilde{}\\{\\}\\$\\&\\#\\%\\_}',
			),
		).toContain('<math');
	});
});
