import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { movedBetween } from '$lib/calc/moved';
import { figuresOf, shownIn } from './figures';
import { gaugeScale } from './gauge';
import { toHtml } from './markdown';

const text = { id: 't', kind: 'text' as const, source: 'At the pin {{Vout: mV}}, from {{Vin}}.' };
const note = (low: string) => [
	text,
	{
		id: 'c',
		kind: 'calculation' as const,
		source: `R2 = ${low}\nVin = 10 V\nVout = Vin * R2 / 4 kohm`,
	},
	{ id: 'r', kind: 'requirement' as const, source: 'Vout <= 3 V' },
];
const present = evaluate(note('1 kohm'), defaultOptions);
const trial = evaluate(note('1.25 kohm'), defaultOptions);
const moved = movedBetween(present, trial);

test('a text shows what a trial makes of a quoted figure beside the present one', () => {
	const find = figuresOf(text, present, moved.figures);
	const html = toHtml(text.source, find);
	expect(html).toContain('data-quantity="Vout">2500&nbsp;<span class="unit">mV</span></span>');
	expect(html).toMatch(/data-tried="Vout".*trial.*3125&nbsp;<span class="unit">mV</);
	expect(html).not.toContain('data-tried="Vin"');
	expect(shownIn(text.source, find)).not.toBe(shownIn(text.source, figuresOf(text, present)));
	expect(toHtml(text.source, figuresOf(text, present))).not.toContain('trial');
});

test('the present value and that of a trial stand on one scale', () => {
	const [one] = moved.requirements;
	const [was, is] = [one!.before!, one!.after!];
	const [scale, other] = [gaugeScale(was, is), gaugeScale(is, was)];
	expect(scale.upper).toBeCloseTo(other.upper!);
	expect(scale.value).toBeLessThan(scale.upper!);
	expect(other.value).toBeGreaterThan(other.upper!);
	expect([scale.beyond, other.beyond]).toEqual([null, null]);
});
