import { describe, expect, test } from 'vitest';
import { formulaHtml, workedHtml } from './line-html';
import { splitLine } from './lines';

const worked = (text: string) => workedHtml(text, splitLine(text));

describe('a line as HTML', () => {
	test('a worked line shows its name typeset and the pieces of its formula', () => {
		expect(worked('V_ref_max = 3.3 V # supply')).toBe(
			'<span class="line-name">V<span class="sym-sub">ref,max</span><span class="sym-eq"> = </span></span>' +
				'<span class="tk-number">3.3</span> <span class="tk-unit">V</span> <span class="tk-comment"># supply</span>',
		);
		expect(worked('mu_r(T) = 2 * T')).toMatch(
			/^<span class="line-name">µ<span class="sym-sub">r<\/span>\(T\)</,
		);
		expect(worked('sqrt(a)')).toBe('<span class="tk-call">sqrt</span>(a)');
	});

	test('a blank line has the height of a line', () => {
		expect(worked('')).toBe('<br>');
		expect(formulaHtml('  ')).toBe('  <br>');
		expect(worked('a = ')).not.toContain('<br>');
	});

	test.each([
		'<img src=x onerror=alert(1)>',
		'a = 1 # <script>alert(1)</script>',
		'f(<b>) = "<i>" & \'x\'',
		'x_<svg onload=alert(1)> = 1',
		'a = "\'><a href=javascript:alert(1)>" < b',
	])('%s stays what was typed', (text) => {
		for (const html of [worked(text), formulaHtml(text)]) {
			const shown = html.replace(/<\/?span( class="[\w-]+")?>/g, '');
			expect(shown).not.toMatch(/[<>"]/);
			expect(unescaped(shown)).toBe(text);
		}
	});
});

const unescaped = (html: string) =>
	html
		.replaceAll('&lt;', '<')
		.replaceAll('&gt;', '>')
		.replaceAll('&quot;', '"')
		.replaceAll('&amp;', '&');
