import { isRefusal } from '$lib/calc/tables/refusal';
import { expect, it } from 'vitest';
import { compareDegrees, type Comparison } from './compare';
import { fitPolynomial } from './fit';
import { predict } from './predict';
import type { Readings } from './readings';

function compared(readings: Readings, highest: number): Comparison {
	const answer = compareDegrees(readings, { highest });
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer;
}

/** A parabola with a scatter that no low power follows. */
const x = Array.from({ length: 12 }, (_, i) => i);
const scatter = [1, -2, 2, -1, 1.5, -1.5, -1, 2, -2, 1, -0.5, 0.5];
const y = x.map((value, i) => 3 + 2 * value + 0.5 * value ** 2 + 0.1 * scatter[i]!);

it('leave-one-out errors are those of fits that leave one out', () => {
	for (const { degree, leaveOneOut } of compared({ x, y }, 3).degrees) {
		const misses = x.map((at, i) => {
			const others = { x: x.filter((_, k) => k !== i), y: y.filter((_, k) => k !== i) };
			const fit = fitPolynomial(others, { degree });
			const there = isRefusal(fit) ? fit : predict(fit, at);
			if (isRefusal(there)) throw new Error(there.message);
			return y[i]! - there.value;
		});
		const rms = Math.hypot(...misses) / Math.sqrt(misses.length);
		expect(leaveOneOut).toBeCloseTo(rms, 10);
	}
});

it('finds the degree that the readings were made with', () => {
	const { degrees, lastSignificant, leastLeaveOneOut } = compared({ x, y }, 4);
	expect(degrees.map(({ degree }) => degree)).toEqual([0, 1, 2, 3, 4]);
	expect(lastSignificant).toBe(2);
	expect(leastLeaveOneOut).toBe(2);
});

it('p-values are those of the F distribution', () => {
	// 161.4476 and 4.964603 are the upper 5 % points of F(1, 1) and F(1, 10) (NIST/SEMATECH e-Handbook, 1.3.6.7.3,
	// four digits there, the others recomputed). Three and twelve points on a line with a scatter made for that F.
	const three = compared({ x: [-1, 0, 1], y: lineWithF(161.4476, [-1, 0, 1], [1, -2, 1]) }, 1);
	expect(three.degrees[1]?.fStatistic).toBeCloseTo(161.4476, 6);
	expect(three.degrees[1]?.pValue).toBeCloseTo(0.05, 7);
	const wide = Array.from({ length: 12 }, (_, i) => i - 5.5);
	const curved = wide.map((value) => value ** 2 - 143 / 12);
	const twelve = compared({ x: wide, y: lineWithF(4.964603, wide, curved) }, 1);
	expect(twelve.degrees[1]?.pValue).toBeCloseTo(0.05, 7);
});

/** y of a line whose F against a constant is given; the rest is orthogonal to line and constant. */
function lineWithF(wanted: number, line: number[], rest: number[]): number[] {
	const squares = (values: number[]) => values.reduce((sum, value) => sum + value * value, 0);
	const freedom = line.length - 2;
	const slope = Math.sqrt((wanted * squares(rest)) / freedom / squares(line));
	return line.map((value, i) => slope * value + rest[i]!);
}

it('compares with stated uncertainties by chi-square', () => {
	// A slope of 1.959964 standard uncertainties has a two-sided probability of 5 %.
	const readings = { x: [-1, 1], y: [-1, 1], uncertainties: [1, 1] };
	const slope = 1.959963984540054 / Math.SQRT2;
	const { degrees } = compared({ ...readings, y: [-slope, slope] }, 1);
	expect(degrees[1]?.pValue).toBeCloseTo(0.05, 12);
	expect(degrees[1]?.leaveOneOut).toBeNull();
});

it('stops where the readings do not determine a higher degree', () => {
	const few = { x: [0, 1, 2, 3], y: [0, 1, 4, 8.5] };
	expect(compared(few, 8).degrees.map(({ degree }) => degree)).toEqual([0, 1, 2]);
	const none = compareDegrees({ x: [], y: [] }, { highest: 3 });
	expect(isRefusal(none) && none.refused).toBe('tooFew');
});
