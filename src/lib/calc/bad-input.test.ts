import { describe, expect, it } from 'vitest';
import { defaultOptions, evaluate } from './evaluate';
import type { Cell, Column } from './results';

/** The one fault of some cells, as the text that it marks and its message. */
function faultOf(cells: Cell[], others: readonly string[] = ['waits']) {
	const { errors } = evaluate(cells, defaultOptions);
	const told = errors.filter(({ code }) => !others.includes(code));
	expect(told).toHaveLength(1);
	const { cell, line, from, to, message, mend } = told[0]!;
	const found = cells.find(({ id }) => id === cell);
	const text =
		found && 'source' in found ? found.source.split('\n')[line - 1]!.slice(from, to) : line;
	return { at: text, message, mend };
}

const two = 'R1 = tolerance(1 ohm, 1 %)\nR2 = tolerance(1 ohm, 1 %)\nR3 = tolerance(1 ohm, 1 %)';

describe('Doubt that cannot be', () => {
	it.each([
		['normal(5 V, 0 V)', '0 V', 'An uncertainty of zero states nothing.'],
		['normal(5 V, -1 mV)', '-1 mV', 'The standard uncertainty must be greater than zero.'],
		['normal(5 V, 1 mV, 0)', '0', 'The coverage factor must be greater than zero.'],
		['normal(5 V, 1 / 0)', '1 / 0', 'Divides by zero.'],
		['tolerance(0 V, 1 %)', '1 %', 'A share of zero is nothing.'],
		['tolerance(5 V, 1 A)', '1 A', 'The value is in V, its half-width in A.'],
		[
			'tolerance(25 degC, 1 %)',
			'1 %',
			'A share of a temperature in °C says nothing: its zero is arbitrary.',
		],
		['student(5 V, 1 mV, 0)', '0', 'The number of degrees of freedom must be greater than zero.'],
		['trapezoidal(5 V, 1 V, 2 V)', '2 V', 'A trapezoid is not wider at the top than at the base.'],
		[
			'inexactRectangular(5 V, 1 V, 2 V)',
			'2 V',
			'A half-width cannot be inexact by more than itself.',
		],
		['repeated(5 V)', 'repeated(5 V)', 'The spread of readings needs two of them at least.'],
		['dof(5 V, 3)', '5 V', '`dof` stands around the function that states the uncertainty.'],
		['tolerance([1, 2], 0.1)', '[1, 2]', 'An uncertainty is stated of one number, not of a list.'],
		[
			'1:tolerance(5, 1)',
			'1:tolerance(5, 1)',
			'A range counts in exact steps, and this is in doubt.',
		],
		[
			'tolerance(5, 1)!',
			'tolerance(5, 1)!',
			'A factorial is taken of an exact number, and this is in doubt.',
		],
	])('%s', (formula, at, message) => {
		const cells: Cell[] = [{ id: 'a', kind: 'calculation', source: `x = ${formula}` }];
		expect(faultOf(cells)).toMatchObject({ at, message });
	});

	it.each([
		['correlated(R1, R2, 1.5)', '1.5', 'A correlation coefficient lies between −1 and 1.'],
		[
			'correlated(R1, R1, 1)',
			'correlated(R1, R1, 1)',
			'A quantity cannot be correlated with itself.',
		],
		[
			'correlated(R1, R2, 0.6)\ncorrelated(R2, R3, 0.6)\ncorrelated(R1, R3, -0.9)',
			'correlated(R1, R3, -0.9)',
			'These correlations contradict each other: no quantities can have all of them.',
		],
		[
			'correlated(R1, 5 ohm, 0.5)',
			'5 ohm',
			'Two inputs can be correlated: quantities that state an uncertainty of their own.',
		],
	])('%s', (lines, at, message) => {
		const cells: Cell[] = [{ id: 'a', kind: 'calculation', source: `${two}\n${lines}` }];
		expect(faultOf(cells)).toMatchObject({ at, message });
	});

	it('is not found in correlations that only together can be true', () => {
		const lines = 'correlated(R1, R2, 0.9)\ncorrelated(R2, R3, 0.9)\ncorrelated(R1, R3, 0.9)';
		const source = `${two}\n${lines}\ns1 = R1 + R2 + R3`;
		const { errors, quantities } = evaluate(
			[{ id: 'a', kind: 'calculation', source }],
			defaultOptions,
		);
		expect(errors).toEqual([]);
		const u = 0.01 / Math.sqrt(3);
		expect(quantities.s1?.standardUncertainty).toBeCloseTo(u * Math.sqrt(3 + 6 * 0.9), 12);
	});

	it('cannot be asked for inside a function', () => {
		const source = 'f1(x) = uncertainty(x)\ny = f1(3)';
		expect(faultOf([{ id: 'a', kind: 'calculation', source }]).message).toBe(
			'`uncertainty` cannot be used inside a function.',
		);
	});
});

describe('A requirement', () => {
	it.each([
		['V1 <= 3.3', 'Compares V with a pure number.', 'Give the pure number a unit, V say.'],
		['V1 <= 3.3 A', 'Compares V with A.', undefined],
	])('%s has a limit of another unit', (source, message, mend) => {
		const cells: Cell[] = [
			{ id: 'a', kind: 'calculation', source: 'V1 = normal(3 V, 1 mV)' },
			{ id: 'q', kind: 'requirement', source },
		];
		expect(faultOf(cells)).toMatchObject({ at: source, message, mend });
	});
});

const column = (name: string, values: number[], more: Partial<Column> = {}): Column => ({
	name,
	unit: '1',
	values,
	...more,
});

describe('Readings and curves', () => {
	const p = column('p', [1, 2, 3]);
	it.each<[string, Column[], number, boolean]>([
		['`q` has 2 readings, `p` has 3.', [p, column('q', [1, 2])], 1, false],
		['Reading 3 of `q` is not a finite number.', [p, column('q', [1, 2, NaN])], 1, false],
		[
			'`blub`, the unit of `q`, is not a unit.',
			[p, column('q', [1, 4, 9], { unit: 'blub' })],
			1,
			false,
		],
		[
			'A straight line needs 3 points here; there are 2.',
			[column('p', [1, 2]), column('q', [1, 2])],
			1,
			false,
		],
		[
			'A straight line is not determined by 1 different x value.',
			[column('p', [1, 1, 1]), column('q', [1, 2, 3])],
			1,
			false,
		],
		[
			'Reading 2 of `q` has an uncertainty that is not above zero.',
			[p, column('q', [1, 4, 9], { uncertainties: [1, 0, 1] })],
			1,
			true,
		],
		['`q` has no uncertainties to weigh its readings by.', [p, column('q', [1, 4, 9])], 1, true],
		['The degree must be a whole number from 0 to 12.', [p, column('q', [1, 4, 9])], 20, false],
	])('%s', (message, columns, degree, weighted) => {
		const cells: Cell[] = [
			{ id: 'r', kind: 'readings', columns },
			{ id: 'k', kind: 'curve', name: 'cal', x: 'p', y: 'q', degree, weighted },
			{ id: 'a', kind: 'calculation', source: 'y1 = cal(1)\ny2 = cal_inverse(2)' },
		];
		expect(faultOf(cells).message).toBe(message);
	});

	it('tells where a curve that turns is asked for its inverse', () => {
		const cells: Cell[] = [
			{
				id: 'r',
				kind: 'readings',
				columns: [column('p', [1, 2, 3, 4]), column('q', [1, 4, 1, 0])],
			},
			{ id: 'k', kind: 'curve', name: 'cal', x: 'p', y: 'q', degree: 2 },
			{ id: 'a', kind: 'calculation', source: 'y1 = cal(1)\ny2 = cal_inverse(2)' },
		];
		expect(faultOf(cells)).toMatchObject({
			at: 'cal_inverse(2)',
			message: 'The curve turns at x = 2.2, so it has no inverse.',
		});
	});
});
