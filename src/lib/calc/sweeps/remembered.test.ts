import { expect, test } from 'vitest';
import { Calculator } from '../calculator';
import { defaultOptions, evaluate } from '../evaluate';
import type { Cell } from '../results';

const cells = (
	{ vmax = '32 V', r1 = 'tolerance(470 kohm, 1 %)', other = '1 V', limit = '2.45 V' } = {},
	curve = 'Vadc over Vmax from 0 V to 40 V in 21 points',
): Cell[] => [
	{
		id: 'a',
		kind: 'calculation',
		source: `Vmax = ${vmax}\nR1 = ${r1}\nR2 = 38.3 kohm\nVadc = Vmax * R2 / (R1 + R2)\nVother = ${other}`,
	},
	{ id: 'q', kind: 'requirement', source: `Vadc <= ${limit}` },
	{ id: 'c', kind: 'curve', source: curve },
];

test('what an edit does not touch is not drawn again, and what it touches is', () => {
	const calculator = new Calculator();
	const draw = (note: Cell[]) => {
		const found = calculator.evaluate(note, defaultOptions);
		expect(found).toEqual(evaluate(note, defaultOptions));
		return found.sweeps?.[0];
	};
	const first = draw(cells());
	expect(draw(cells({ other: '2 V' }))).toBe(first);
	const edits = [
		{ vmax: '31 V' },
		{ r1: 'tolerance(471 kohm, 1 %)' },
		{ r1: 'tolerance(470 kohm, 2 %)' },
		{ limit: '2.4 V' },
		{ r1: '(400 + 70) kohm' },
		{},
	];
	let last = first;
	for (const edit of edits) {
		const next = draw(cells(edit));
		expect(next).not.toBe(last);
		last = next;
	}
	expect(draw(cells({}, 'Vadc over Vmax from 0 V to 30 V in 21 points'))?.x.at(-1)).toBe(30);
	expect(draw(cells({}, ''))).toBeUndefined();
});
