import { expect, test } from 'vitest';
import { calculation, compute, requirement, spaced } from '../../../../../tests/support/notes';
import { figureNews } from './figure-news';

const note = (top: string) =>
	compute(calculation(`V_top = ${top}\nV_half = V_top / 2`), requirement('V_half <= 3 V'));
const news = (before: string, now: string, line = 1) =>
	spaced(figureNews(note(before), note(now), { cellId: 'calc', line }));

test('the line one writes in is told when its figure changed', () => {
	expect(news('5 V', '5.5 V')).toBe('V_top: 5.5 V.');
	expect(news('5 V', '5.5 V', 2)).toBe('V_half: 2.75 V.');
	expect(news('5 V', '5 V')).toBe('');
});

test('a verdict that turned is told wherever it stands', () => {
	expect(news('5 V', '8 V')).toMatch(/^V_top: 8 V\. Requirement on 4 V: Not met/);
});

test('a fault of the line is told, a figure elsewhere is not', () => {
	expect(news('5 V', '5 V +')).toMatch(/^Error: /);
	expect(figureNews(note('5 V'), note('5.5 V'), undefined)).toBe('');
});
