import { refuse, refuseNotFinite, type Refusal } from './refusal';
import type { Slope } from './root';

/** Value and slope between the points of a table. Refuses an x outside it. */
export type Interpolation = (x: number) => Slope | Refusal;

/** Straight lines between neighbouring points; at a point the line to its right counts, at the last that to its left. */
export function linear(xs: readonly number[], ys: readonly number[]): Interpolation | Refusal {
	const points = tableOf(xs, ys);
	if ('refused' in points) return points;
	return within(points, (i, x) => {
		const derivative = steepness(points, i);
		// From the nearer end, so that the table's own points come back unrounded.
		const [left, right] = [x - points.x[i]!, x - points.x[i + 1]!];
		const near = left < -right ? i : i + 1;
		return { value: points.y[near]! + derivative * (near === i ? left : right), derivative };
	});
}

/**
 * Cubic pieces that rise and fall only where the points do (Fritsch and Carlson, SIAM Journal on Numerical Analysis 17,
 * 1980; slopes after Fritsch and Butland, SIAM Journal on Scientific and Statistical Computing 5, 1984).
 */
export function monotoneCubic(
	xs: readonly number[],
	ys: readonly number[],
): Interpolation | Refusal {
	const points = tableOf(xs, ys);
	if ('refused' in points) return points;
	const slopes = points.x.map((_, i) => slopeAt(points, i));
	return within(points, (i, x) => {
		const width = points.x[i + 1]! - points.x[i]!;
		const share = (x - points.x[i]!) / width;
		const rise = points.y[i + 1]! - points.y[i]!;
		const [first, last] = [slopes[i]! * width, slopes[i + 1]! * width];
		const cubic = first + last - 2 * rise;
		const square = 3 * rise - 2 * first - last;
		return {
			value: points.y[i]! + share * (first + share * (square + share * cubic)),
			derivative: (first + share * (2 * square + share * 3 * cubic)) / width,
		};
	});
}

interface Points {
	x: number[];
	y: number[];
}

function tableOf(xs: readonly number[], ys: readonly number[]): Points | Refusal {
	if (xs.length !== ys.length)
		return refuse('lengths', `xs has ${xs.length} members and ys has ${ys.length}`, {
			argument: 'ys',
		});
	if (xs.length < 2)
		return refuse('tooFew', 'A table needs at least two points', { argument: 'xs' });
	for (const [argument, values] of Object.entries({ xs, ys })) {
		const bad = values.findIndex((value) => !Number.isFinite(value));
		if (bad >= 0)
			return refuse('notFinite', `Member ${bad + 1} of ${argument} is not a finite number`, {
				argument,
			});
	}
	const falling = xs[1]! < xs[0]!;
	const x = falling ? xs.toReversed() : [...xs];
	const y = falling ? ys.toReversed() : [...ys];
	if (x.some((value, i) => i > 0 && value <= x[i - 1]!))
		return refuse('order', 'The members of xs must rise, or fall, all the way', { argument: 'xs' });
	return { x, y };
}

function within({ x: xs }: Points, at: (i: number, x: number) => Slope): Interpolation {
	const [lower, upper] = [xs[0]!, xs.at(-1)!];
	return (x) => {
		const fault = refuseNotFinite({ x });
		if (fault) return fault;
		if (x < lower || x > upper)
			return refuse('outOfRange', `The table runs from ${lower} to ${upper}`, { argument: 'x' });
		let low = 0;
		let high = xs.length - 1;
		while (high - low > 1) {
			const middle = (low + high) >> 1;
			if (xs[middle]! <= x) low = middle;
			else high = middle;
		}
		return at(low, x);
	};
}

function steepness({ x, y }: Points, i: number): number {
	return (y[i + 1]! - y[i]!) / (x[i + 1]! - x[i]!);
}

/** Weighted harmonic mean of the neighbouring steepnesses, zero where they differ in sign; at the ends a parabola's. */
function slopeAt(points: Points, i: number): number {
	const { x } = points;
	const last = x.length - 1;
	if (last === 1) return steepness(points, 0);
	if (i === 0)
		return endSlope(x[1]! - x[0]!, x[2]! - x[1]!, steepness(points, 0), steepness(points, 1));
	if (i === last)
		return endSlope(
			x[last]! - x[last - 1]!,
			x[last - 1]! - x[last - 2]!,
			steepness(points, last - 1),
			steepness(points, last - 2),
		);
	const [before, after] = [steepness(points, i - 1), steepness(points, i)];
	if (before * after <= 0) return 0;
	const [left, right] = [x[i]! - x[i - 1]!, x[i + 1]! - x[i]!];
	const [p, q] = [2 * right + left, right + 2 * left];
	return (p + q) / (p / before + q / after);
}

function endSlope(near: number, far: number, steep: number, next: number): number {
	const slope = ((2 * near + far) * steep - near * next) / (near + far);
	if (slope * steep <= 0) return 0;
	if (steep * next < 0 && Math.abs(slope) > 3 * Math.abs(steep)) return 3 * steep;
	return slope;
}
