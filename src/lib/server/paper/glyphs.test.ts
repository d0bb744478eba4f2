import { readFileSync } from 'node:fs';
import { beforeAll, expect, test } from 'vitest';
import { useFonts, visible, visibleInFormula } from './glyphs';

beforeAll(() => {
	const font = 'node_modules/@expo-google-fonts/fira-sans/400Regular/FiraSans_400Regular.ttf';
	useFonts([readFileSync(font)]);
});

test('signs that the font has stand as they are: Latin, Greek, Cyrillic, units and operators', () => {
	const text = 'Größe łódź Ελλάδα Москва 4.7 kΩ ± 0.1 % µ° −≤≥≠∞ “x” – … ²³⁻⁵';
	expect(visible(text)).toBe(text);
});

test('what no font has, or nobody can see, stands as its number', () => {
	expect(visible('漢')).toBe('[U+6F22]');
	expect(visible('😀')).toBe('[U+1F600]');
	expect(visible('a\u202eb\u0007c\u200bd\ufeff')).toBe('a[U+202E]b[U+0007]c[U+200B]d[U+FEFF]');
	expect(visible('\ue000\ud800')).toBe('[U+E000][U+D800]');
});

test('spaces become ones that every font has, and composed letters are one sign', () => {
	expect(visible('1\u202f234\u2009V')).toBe('1\u00a0234\u00a0V');
	expect(visible('e\u0301')).toBe('é');
	expect(visible('a\r\n\tb')).toBe('a\n    b');
});

test('a formula has signs of mathematics besides', () => {
	expect(visibleInFormula('∥∑α⟨')).toBe('∥∑α⟨');
	expect(visible('∥')).toBe('[U+2225]');
	expect(visibleInFormula('漢')).toBe('[U+6F22]');
});
