import fc from 'fast-check';
import { expect, it } from 'vitest';
import { linear, monotoneCubic, type Interpolation } from './interpolation';
import { isRefusal, type Refusal } from './refusal';
import type { Slope } from './root';

function made(table: Interpolation | Refusal): (x: number) => Slope {
	if (isRefusal(table)) throw new Error(table.message);
	return (x) => {
		const answer = table(x);
		if (isRefusal(answer)) throw new Error(answer.message);
		return answer;
	};
}

const xs = [0, 1, 2.5, 3, 6, 7];
const ys = [1, 1.5, 4, 4, 3, 7];

it('joins points by straight lines, and gives the points themselves unrounded', () => {
	const at = made(linear(xs, ys));
	expect(at(1.6)).toEqual({ value: 1.5 + (2.5 / 1.5) * 0.6000000000000001, derivative: 2.5 / 1.5 });
	for (const [i, x] of xs.entries()) expect(at(x).value).toBe(ys[i]);
	expect(at(7).derivative).toBe(4);
});

it('gives the same monotone cubic as a second implementation of it', () => {
	// Recomputed with SciPy 1.17, PchipInterpolator, on the same points.
	const at = made(monotoneCubic(xs, ys));
	const rows = [
		[0.3, 1.066117821782178, 0.38728382838283826],
		[0.9, 1.4261514851485149, 0.732155115511551],
		[1.7, 2.773039970663733, 2.3304730473047304],
		[2.75, 4, 0],
		[4.2, 3.648, -0.48],
		[6.6, 4.8599999999999985, 5.149999999999999],
	] as const;
	for (const [x, value, derivative] of rows) {
		expect(at(x).value).toBeCloseTo(value, 13);
		expect(at(x).derivative).toBeCloseTo(derivative, 13);
	}
});

it('a monotone cubic stays between neighbouring points, whatever they are', () => {
	const step = fc.double({ min: 0.01, max: 10, noNaN: true });
	const height = fc.double({ min: -100, max: 100, noNaN: true });
	fc.assert(
		fc.property(fc.array(fc.tuple(step, height), { minLength: 2, maxLength: 8 }), (points) => {
			let sum = 0;
			const x = points.map(([width]) => (sum += width));
			const y = points.map(([, value]) => value);
			const at = made(monotoneCubic(x, y));
			for (let i = 0; i + 1 < x.length; i++)
				for (const share of [0.1, 0.37, 0.5, 0.81]) {
					const { value } = at(x[i]! + share * (x[i + 1]! - x[i]!));
					expect(value).toBeGreaterThanOrEqual(Math.min(y[i]!, y[i + 1]!) - 1e-9);
					expect(value).toBeLessThanOrEqual(Math.max(y[i]!, y[i + 1]!) + 1e-9);
				}
		}),
	);
});

it('reads a falling table as the rising one turned over', () => {
	for (const method of [linear, monotoneCubic]) {
		const rising = made(method(xs, ys));
		const falling = made(method(xs.toReversed(), ys.toReversed()));
		for (const x of [0.2, 2.6, 5]) expect(falling(x)).toEqual(rising(x));
	}
});

it('a monotone cubic through two points is a line', () => {
	expect(made(monotoneCubic([1, 3], [5, 9]))(2)).toEqual({ value: 7, derivative: 2 });
});

it.each([
	[[1, 2], [1], 'xs has 2 members and ys has 1'],
	[[1], [1], 'A table needs at least two points'],
	[[1, NaN], [1, 2], 'Member 2 of xs is not a finite number'],
	[[1, 2, 2], [1, 2, 3], 'The members of xs must rise, or fall, all the way'],
	[[1, 3, 2], [1, 2, 3], 'The members of xs must rise, or fall, all the way'],
])('refuses the table %j, %j', (x, y, message) => {
	for (const method of [linear, monotoneCubic]) {
		const answer = method(x, y);
		expect(isRefusal(answer) && answer.message).toBe(message);
	}
});

it('refuses an x outside the table', () => {
	const table = linear(xs, ys);
	if (isRefusal(table)) throw new Error(table.message);
	const beyond = table(7.01);
	expect(isRefusal(beyond) && beyond.message).toBe('The table runs from 0 to 7');
	expect(isRefusal(table(NaN))).toBe(true);
});
