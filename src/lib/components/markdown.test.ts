import { describe, expect, test } from 'vitest';
import { leastSpentMs } from '../../../tests/support/spent';
import type { FindReadout } from './figures';
import { headingsOf, longestProse, toHtml as toHtmlWith } from './markdown';
import { render } from './tex-html';

const toHtml = (source: string, find: FindReadout) => toHtmlWith(source, find, render);

const find: FindReadout = (quoted) =>
	quoted === '{{Vadc}}' ? { text: '2.41 V', number: '2.41', unit: 'V' } : undefined;

/** Tags and attributes that toHtml may give, everything else is a hole. */
const allowed =
	/^<\/?(?:p|h[234]|em|strong|s|code|pre|ul|ol|li|blockquote|hr|br|table|thead|tbody|tr|th|td|div|span|small|a)(?: (?:class|data-quantity|dir|start|title|rel|target|href|style)="[^"<>]*")*\/?>$/;

/** What a set formula is made of beside that. */
const allowedInFormula =
	/^<\/?(?:span|math|semantics|annotation|m[a-z]+|svg|path|line|g)(?: (?:class|style|aria-hidden|xmlns|encoding|display|d|viewBox|preserveAspectRatio|width|height|[xy][12]|stroke-width|math[a-z]+|stretchy|fence|separator|accent|accentunder|lspace|rspace|minsize|maxsize|columnalign|columnspacing|rowspacing|columnlines|rowlines|scriptlevel|displaystyle|linethickness|notation|voffset|movablelimits|largeop|symmetric|title)="[^"<>]*")*\/?>$/;

function holes(html: string): string[] {
	const tags = html.match(/<[^>]*>?/g) ?? [];
	return tags.filter(
		(tag) =>
			(!allowed.test(tag) && !allowedInFormula.test(tag)) ||
			/href="(?!https?:\/\/|mailto:)/i.test(tag) ||
			/style="[^"]*(?:url|expression|import|fixed|absolute|@|\\)/i.test(tag),
	);
}

const attacks = [
	'<script>alert(1)</script>',
	'<img src=x onerror=alert(1)>',
	'<svg/onload=alert(1)>',
	'<iframe src="javascript:alert(1)"></iframe>',
	'<a href="javascript:alert(1)">x</a>',
	'<style>@import "//evil.example"</style>',
	'<!--><script>alert(1)</script>-->',
	'<div\nonclick=alert(1)>',
	'[x](javascript:alert(1))',
	'[x](JaVaScRiPt:alert(1))',
	'[x](java\tscript:alert(1))',
	'[x](&#x6A;avascript:alert(1))',
	'[x](javascript&colon;alert(1))',
	'[x](\\x6Aavascript:alert(1))',
	'[x]( javascript:alert(1))',
	'[x](<javascript:alert(1)>)',
	'[x](data:text/html,<script>alert(1)</script>)',
	'[x](data:text/html;base64,PHNjcmlwdD5hbGVydCgxKTwvc2NyaXB0Pg==)',
	'[x](vbscript:msgbox(1))',
	'[x](file:///etc/passwd)',
	'[x](//evil.example)',
	'[x](/sign-out)',
	'<javascript:alert(1)>',
	'<https://a.example/"onmouseover="alert(1)>',
	'[x]: javascript:alert(1)\n\n[x]',
	'![x](https://evil.example/pixel.png)',
	'![x](javascript:alert(1))',
	'![x][y]\n\n[y]: data:image/svg+xml,<svg/onload=alert(1)>',
	'[x](https://a.example "\\" onmouseover=\\"alert(1)")',
	'[x](https://a.example/"onmouseover="alert(1))',
	'[![x](https://evil.example/p.png)](javascript:alert(1))',
	'```"><script>alert(1)</script>\ncode\n```',
	'```js" onmouseover="alert(1)\ncode\n```',
	'`<script>alert(1)</script>`',
	'{{<script>alert(1)</script>}}',
	'{{Vadc" onmouseover="alert(1)}}',
	'{{Vadc}}<script>alert(1)</script>{{Vadc}}',
	'[{{Vadc}}](javascript:alert(1))',
	'[x](javascript:{{Vadc}})',
	'| a |\n|---|\n| <script>alert(1)</script> |',
	'# <script>alert(1)</script>',
	'&lt;script&gt;alert(1)&lt;/script&gt;',
	'$\\href{javascript:alert(1)}{x}$',
	'$\\url{javascript:alert(1)}$',
	'$\\includegraphics{https://evil.example/p.png}$',
	'$\\htmlClass{x}{y}\\htmlId{a}{b}\\htmlStyle{position:fixed}{c}\\htmlData{d=e}{f}$',
	'$\\text{<img src=x onerror=alert(1)>}$',
	'$<script>alert(1)</script>$',
	'$$\n"><script>alert(1)</script>\n$$',
	'$\\color{red" onmouseover="alert(1)}x$',
	'$\\textcolor{url(javascript:alert(1))}{x}$',
	'$\\rule{1em;position:fixed}{1em}$',
	'$\\char"3C script\\char"3E$',
	'$\\def\\x{\\href{javascript:alert(1)}{y}}\\x$',
	'[$x$](javascript:alert(1))',
	'\u0000<script>alert(1)</script>',
	'<\u0000script>alert(1)</script>',
];

describe('what a writer types stays inert', () => {
	test.each(attacks)('%j', (source) => {
		expect(holes(toHtml(source, find))).toEqual([]);
	});

	test('a readout whose text carries markup is shown as text', () => {
		const evil = '"><script>alert(1)</script>';
		const html = toHtml('{{x}}', () => ({ text: evil, number: evil, unit: evil, doubt: evil }));
		expect(holes(html)).toEqual([]);
		expect(html).toContain('&lt;script&gt;');
	});

	test('the check itself finds a hole', () => {
		expect(holes('<p onclick="x">')).not.toEqual([]);
		expect(holes('<a href="javascript:x">')).not.toEqual([]);
		expect(holes('<script>')).not.toEqual([]);
	});
});

describe('text that is made to be slow', () => {
	const bombs: [string, string][] = [
		['nested quotations', '>'.repeat(50_000)],
		['nested lists', '- '.repeat(50_000)],
		['indented lists', Array.from({ length: 440 }, (_, i) => `${' '.repeat(i)}- x`).join('\n')],
		['open brackets', '['.repeat(50_000)],
		['bracket pairs', '[]('.repeat(30_000)],
		['nested links', `${'['.repeat(20_000)}x${']('.repeat(20_000)}`],
		['emphasis', '*a_'.repeat(33_000)],
		['stars', '*'.repeat(100_000)],
		['alternating stars', '**a *b '.repeat(14_000)],
		['back-ticks', Array.from({ length: 440 }, (_, i) => '`'.repeat(i)).join(' ')],
		['tildes', '~~a '.repeat(25_000)],
		['entities', '&#x41;'.repeat(16_000)],
		['escapes', '\\*'.repeat(50_000)],
		['open figures', '{{'.repeat(50_000)],
		['figures', '{{Vadc}} '.repeat(11_000)],
		['a wide table', `${'|a'.repeat(15_000)}\n${'|-'.repeat(15_000)}\n|x`],
		['a tall table', `|a|\n|-|\n${'|b|\n'.repeat(20_000)}`],
		['autolinks', '<a@'.repeat(33_000)],
		['formulas', '$x^2$ '.repeat(16_000)],
		['open formulas', '$x '.repeat(30_000)],
		[
			'formulas of all kinds',
			Array.from({ length: 900 }, (_, i) => `$\\frac{${i}}{\\sqrt{x_${i}}}$`).join(' '),
		],
		['deep formulas', `$${'{'.repeat(480)}x${'}'.repeat(480)}$ `.repeat(30)],
		['deep fractions', `$${'\\frac{1}{'.repeat(90)}x${'}'.repeat(90)}$ `.repeat(30)],
		['deep roots', `$${'\\sqrt{'.repeat(120)}x${'}'.repeat(120)}$ `.repeat(30)],
		['a macro of itself', '$\\def\\x{\\x\\x}\\x$ '.repeat(1_500)],
		[
			'a growing macro',
			`$${'\\def\\a{\\b\\b}\\def\\b{\\c\\c}\\def\\c{\\d\\d}\\def\\d{xxxxxxxx}'}\\a$ `.repeat(500),
		],
		['a huge rule', '$\\rule{9999999em}{9999999em}$ '.repeat(900)],
		['a wide matrix', `$\\begin{matrix}${'a&'.repeat(400)}\\end{matrix}$ `.repeat(30)],
		['dollars', '$'.repeat(100_000)],
		['escaped dollars', '\\$'.repeat(50_000)],
		['open blocks', '$$\nx\n'.repeat(15_000)],
		['comments', '<!--'.repeat(25_000)],
		['references', Array.from({ length: 5000 }, (_, i) => `[r${i}]: https://a.example`).join('\n')],
		['lines', '\n'.repeat(100_000)],
	];
	const quick = 200;
	const spent = (work: () => void) => leastSpentMs(work, quick);

	test.each(bombs)('%s as long as text may be is rendered within 200 ms', (_name, source) => {
		const text = source.slice(0, longestProse);
		expect(spent(() => toHtml(text, find))).toBeLessThan(quick);
		expect(holes(toHtml(text, find))).toEqual([]);
		expect(spent(() => headingsOf(text, find))).toBeLessThan(quick);
	});

	test.each(bombs)('%s at full length is shown as typed at once', (_name, source) => {
		const text = source.padEnd(longestProse + 1, ' x');
		expect(spent(() => toHtml(text, find))).toBeLessThan(quick);
		expect(holes(toHtml(text, find))).toEqual([]);
		expect(headingsOf(text, find)).toEqual([]);
	});
});

describe('what it shows', () => {
	test('a figure stands as a readout, an unknown one as it was typed', () => {
		expect(toHtml('sees {{Vadc}}, {{Vx: mV}}', find)).toBe(
			'<p>sees <span class="readout" data-quantity="Vadc">2.41&nbsp;<span class="unit">V</span></span>, ' +
				'<span class="no-readout">{{Vx: mV}}</span></p>\n',
		);
	});

	test('a figure in code is left as it is', () => {
		expect(toHtml('`{{Vadc}}`', find)).toBe('<p><code>{{Vadc}}</code></p>\n');
	});

	test('a link to the web opens apart and tells its target nothing', () => {
		expect(toHtml('[a](https://a.example)', find)).toContain(
			'<a href="https://a.example" rel="noopener noreferrer nofollow" target="_blank">a</a>',
		);
	});

	test("formulas are set within a line and on lines of their own, with the note's figures in them", () => {
		expect(toHtml('the gain $\\frac{R_2}{R_1}$ of it', find)).toMatch(
			/^<p>the gain <span class="katex">.*<mfrac>.* of it<\/p>\n$/s,
		);
		expect(toHtml('so\n\n$$\nU = R \\cdot I\n$$\n\nthen', find)).toMatch(
			/<div class="table"><span class="katex-display">.*<\/div>\n<p>then/s,
		);
		expect(toHtml('- a\n\n  $$x$$\n- b', find)).toMatch(/<li>.*katex-display.*<\/li>/s);
		expect(toHtml('$V = {{Vadc}}$', find)).toContain('<mtext>2.41</mtext>');
	});

	test('what a formula may not hold stands in the colour of faults, which is readable on a dark sheet too', () => {
		expect(toHtml('$\\href{https://a.example}{x}$', find)).toContain('style="color:var(--fail);"');
	});

	test.each(['5 $ and 6 $', 'US$5 or $6', 'a $ b$ c', '\\$x\\$', '`$x$`', '$', '$$', '$$\nx'])(
		'%j holds no formula',
		(source) => expect(toHtml(source, find)).not.toContain('katex'),
	);

	test('a formula that cannot be set, or that nothing sets yet, stands as it was typed', () => {
		expect(toHtml('$\\frac{1}$', find)).toBe('<p><code>$\\frac{1}$</code></p>\n');
		expect(toHtmlWith('$x$', find)).toBe('<p><code>$x$</code></p>\n');
	});

	test('headings start below the title and appear in the outline', () => {
		const source = '# Purpose\n\n### At *{{Vadc}}*\n\ntext\n\n```\n# code\n```';
		expect(toHtml(source, find)).toContain('<h2>Purpose</h2>');
		expect(headingsOf(source, find)).toEqual([
			{ level: 2, text: 'Purpose' },
			{ level: 3, text: 'At 2.41 V' },
		]);
	});
});
