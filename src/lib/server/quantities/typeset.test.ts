import { expect, test } from 'vitest';
import { typeset } from './typeset';

test('a formula is set for the eye and, as MathML, for a screen reader', () => {
	const html = typeset('V = \\frac{a}{b}');
	expect(html).toContain('class="katex-html" aria-hidden="true"');
	expect(html).toContain('<math');
	expect(html).toContain('<mfrac>');
});

test('no markup and no address gets through', () => {
	expect(typeset('\\text{<img src=x onerror=alert(1)>}')).not.toContain('<img');
	expect(typeset('\\href{javascript:alert(1)}{x}') ?? '').not.toContain('href=');
	expect(typeset('\\includegraphics{https://elsewhere.test/a.png}') ?? '').not.toContain('<img');
});

test('what cannot be set gives nothing instead of an error', () => {
	expect(typeset('\\frac{a}')).toBeNull();
	expect(typeset('\\def\\a{\\a\\a}\\a')).toBeNull();
});
