import { describe, expect, it } from 'vitest';
import { moments } from '../intervals';
import { Random } from '../random';
import { arcsine } from './arcsine';
import type { Distribution, ParameterFault } from './distribution';
import { inexactRectangular } from './inexact-rectangular';
import { normal } from './normal';
import { rectangular } from './rectangular';
import { repeated } from './repeated';
import { halfWidth, shapes, withDof } from './shapes';
import { student } from './student';
import { trapezoidal } from './trapezoidal';
import { triangular } from './triangular';

type Made = Distribution | ParameterFault;

/** Standard uncertainties of JCGM 101:2008, 6.4, table 1 and its clauses, and the half-width for the worst case. */
const kinds: [string, Made, number, number][] = [
	['normal', normal(2), 2, 6],
	['normal, expanded', normal(6, 3), 2, 6],
	['rectangular', rectangular(3), 3 / Math.sqrt(3), 3],
	['triangular', triangular(3), 3 / Math.sqrt(6), 3],
	['arcsine', arcsine(3), 3 / Math.sqrt(2), 3],
	['trapezoidal', trapezoidal(3, 1), Math.sqrt(10 / 6), 3],
	['inexact rectangular', inexactRectangular(3, 1), Math.sqrt(3 + 1 / 9), 4],
	['t', student(2, 12), 2, 6],
];

describe.each(kinds)('%s', (_, made, u, width) => {
	const distribution = made as Distribution;
	const count = 200_000;
	const values = new Float64Array(count);
	const random = new Random();
	random.start(11, 3, 0);
	shapes[distribution.kind].fill(distribution.parameters, random, values, count);

	it('has its standard uncertainty and half-width', () => {
		expect(distribution.uncertainty).toBeCloseTo(u, 12);
		expect(halfWidth(distribution)).toBe(width);
	});

	it('is drawn with its mean and standard deviation', () => {
		const { mean, standardUncertainty } = moments(values);
		// A t distribution is wider than its scale (JCGM 101:2008, 6.4.9.4).
		const { dof } = distribution;
		const spread = dof === Infinity ? u : u * Math.sqrt(dof / (dof - 2));
		expect(Math.abs(mean)).toBeLessThan((5 * spread) / Math.sqrt(count));
		expect(Math.abs(standardUncertainty / spread - 1)).toBeLessThan(0.01);
	});

	it('stays inside its ends, if it has any', () => {
		const { kind } = distribution;
		if (kind === 'normal' || kind === 'student')
			expect(values.some((value) => Math.abs(value) > width)).toBe(true);
		else expect(values.every((value) => Math.abs(value) <= width)).toBe(true);
	});
});

describe('Parameters that make no distribution', () => {
	it.each<[string, Made | ReturnType<typeof repeated>, string, number]>([
		['u of zero', normal(0), 'notPositive', 1],
		['a negative u', normal(-1), 'notPositive', 1],
		['a u that is no number', normal(NaN), 'notFinite', 1],
		['a coverage factor of zero', normal(1, 0), 'notPositive', 2],
		['an endless half-width', rectangular(Infinity), 'notFinite', 1],
		['a half-width of zero', triangular(0), 'notPositive', 1],
		['a negative half-width', arcsine(-2), 'notPositive', 1],
		['a trapezoid that widens upwards', trapezoidal(1, 2), 'order', 2],
		['a negative top', trapezoidal(1, -1), 'notPositive', 2],
		['an inexactness beyond the half-width', inexactRectangular(1, 2), 'order', 2],
		['no degrees of freedom', student(1, 0), 'notPositive', 2],
		['degrees of freedom of nothing', withDof(rectangular(1) as Distribution, 0), 'notPositive', 1],
		['one reading', repeated([1]), 'tooFew', 1],
		['readings that are all the same', repeated([2, 2, 2]), 'noSpread', 1],
		['a reading that is no number', repeated([1, NaN]), 'notFinite', 2],
	])('%s is a fault', (_, made, fault, parameter) => {
		expect(made).toMatchObject({ fault, parameter });
	});
});

describe('Degrees of freedom', () => {
	it('turn a normal distribution into a t distribution and leave others as they are', () => {
		expect(withDof(normal(2) as Distribution, 5)).toEqual(student(2, 5));
		expect(withDof(rectangular(2) as Distribution, 5)).toMatchObject({
			kind: 'rectangular',
			dof: 5,
		});
	});
});
