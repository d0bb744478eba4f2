import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '../evaluate';
import type { Cell, Fault } from '../results';

const lines = [
	'Vmax = 32 V',
	'R1 = 470 kohm',
	'R2 = 38.3 kohm',
	'Vadc = Vmax * R2 / (R1 + R2)',
	'Tair = 25 degC',
	'Rt = pt(Tair, 100 ohm)',
	'list1 = [1, 2, 3]',
	'double(x) = 2 x',
	'wrong = 1 V + 1 A',
	'twice = Vadc * wrong',
	'mean1 = repeated(1 V, 2 V, 3 V)',
	'Vsum = mean1 + Vmax',
];

function faults(source: string): Fault[] {
	const cells: Cell[] = [
		{ id: 'a', kind: 'calculation', source: lines.join('\n') },
		{ id: 'c', kind: 'curve', source },
	];
	return evaluate(cells, defaultOptions).errors.filter(({ cell }) => cell === 'c');
}

test.each([
	['Vadc', 'syntax', 'Vadc', 'A curve is a quantity over another one.'],
	['over Vmax from 0 V to 4 V', 'syntax', 'o', 'The quantity is missing in front of `over`.'],
	[
		'Vadc, over Vmax from 0 V to 4 V',
		'syntax',
		',',
		'The name of a quantity is missing behind `,`.',
	],
	[
		'Vadc over from 0 V to 4 V',
		'syntax',
		'over',
		'The name of a quantity is missing behind `over`.',
	],
	['Vadc over Vmax', 'syntax', 'Vmax', 'The range is missing.'],
	['Vadc over Vmax from 0 V', 'syntax', 'from 0 V', 'The range has no end.'],
	['Vadc over Vmax from to 4 V', 'syntax', 'from', 'A value is missing behind `from`.'],
	['2 * Vadc over Vmax from 0 V to 4 V', 'syntax', '2 * Vadc', 'is not the name of a quantity'],
	['Vadx over Vmax from 0 V to 4 V', 'unknownName', 'Vadx', '`Vadx` is not defined.'],
	['Vadc over Vmix from 0 V to 4 V', 'unknownName', 'Vmix', '`Vmix` is not defined.'],
	['Vadc over Vmax from 0 A to 4 V', 'dimension', '0 A', '`Vmax` is in V, but `0 A` is in A.'],
	['Vadc over Vmax from 0 to 4 V', 'dimension', '0', '`Vmax` is in V, but `0` is a pure number.'],
	['Rt over Tair from 0 K to 9 degC', 'dimension', '0 K', 'but `0 K` is in K'],
	[
		'Vadc over Vmax from 4 V to 0 V',
		'value',
		'4 V to 0 V',
		'The range ends where it begins, or before.',
	],
	[
		'Vadc over Vmax from 0 V to 4 V logarithmic',
		'value',
		'0 V',
		'Logarithmic steps begin above zero.',
	],
	['Vadc over Vmax from 0 V to 4 V in 1 points', 'value', '1', 'a whole number of at least 2'],
	[
		'Vadc over Vmax from 0 V to 4 V in 900 points',
		'tooLarge',
		'900',
		'A curve has 401 points at most.',
	],
	['Rt over Vmax from 0 V to 4 V', 'value', 'Rt', '`Rt` does not depend on `Vmax`.'],
	['Vmax over Vmax from 0 V to 4 V', 'value', 'Vmax', 'over itself is a straight line'],
	['Vsum over mean1 from 0 V to 4 V', 'value', 'mean1', 'has no single value to be replaced'],
	['Vadc, Rt over Vmax from 0 V to 4 V', 'dimension', 'Rt', 'one axis cannot hold both'],
	['Vadc, Vadc over Vmax from 0 V to 4 V', 'duplicate', 'Vadc', '`Vadc` is drawn already.'],
	['list1 over Vmax from 0 V to 4 V', 'value', 'list1', '`list1` is no single number.'],
	['double over Vmax from 0 V to 4 V', 'value', 'double', '`double` is a function'],
	['twice over Vmax from 0 V to 4 V', 'waits', 'twice', 'Waits, through `twice`, for `wrong`'],
	['Vadc over Vmax from 0 V to wrong', 'waits', 'wrong', 'Waits for `wrong`'],
	['Vadc over Vmax from 0 V to 4 V\nmore', 'syntax', 'more', 'A curve cell holds one line.'],
])('%s', (source, code, place, sentence) => {
	const [fault, ...others] = faults(source);
	expect(others).toEqual([]);
	expect(fault?.code).toBe(code);
	expect(fault?.message).toContain(sentence);
	expect(source.split('\n')[fault!.line - 1]!.slice(fault!.from, fault!.to)).toBe(place);
});

test('what is mended at once says with what', () => {
	expect(faults('Vadx over Vmax from 0 V to 4 V')[0]).toMatchObject({ replacement: 'Vadc' });
	expect(faults('Vadc over Vmax from 0 to 4 V')[0]).toMatchObject({ replacement: '0 V' });
	expect(faults('Vadc over Vmax from 0 V to 4 V in 900 points')[0]).toMatchObject({
		replacement: '401',
	});
});

test('a computed quantity cannot be swept, and its inputs are named', () => {
	const source = [...lines, 'Vhalf = Vadc / 2'].join('\n');
	const cells: Cell[] = [
		{ id: 'a', kind: 'calculation', source },
		{ id: 'c', kind: 'curve', source: 'Vhalf over Vadc from 0 V to 2 V' },
	];
	const found = evaluate(cells, defaultOptions).errors.find(({ cell }) => cell === 'c');
	expect(found).toMatchObject({
		code: 'value',
		mend: 'Draw over an input of it: `Vmax`, `R2`, `R1`.',
	});
});

test('an empty cell and one of comments draw nothing and are no fault', () => {
	expect(faults('')).toEqual([]);
	expect(faults('# later\n')).toEqual([]);
});

test('the curves of a note have a bound, which is named and leaves the rest of the note alone', () => {
	const long = [
		'x0 = 1',
		...Array.from({ length: 800 }, (_, i) => `x${i + 1} = x${i} * 1.001 + 1`),
	];
	const cells: Cell[] = [
		{ id: 'a', kind: 'calculation', source: long.join('\n') },
		{ id: 'c', kind: 'curve', source: 'x800 over x0 from 1 to 2 in 401 points' },
	];
	const { errors, quantities } = evaluate(cells, defaultOptions);
	expect(errors).toEqual([
		expect.objectContaining({
			cell: 'c',
			code: 'tooLong',
			mend: 'Ask for fewer points: `in 21 points`.',
		}),
	]);
	expect(quantities.x800!.value).toBeGreaterThan(800);
});
