import type { Enclosure } from './enclose';
import { lineFunction, type Model } from './model';

/** Lowest and highest value of a line over the intervals of its inputs, correlations left aside. */
export interface WorstCase {
	lower: number;
	upper: number;
	/** Proved: the line rises or falls with each input all over its interval. Otherwise the values were searched for. */
	exact: boolean;
}

/** Inputs whose corners are all tried before the search goes input by input. */
const cornersOf = 8;
const points = 7;
const rounds = 3;

/** `halfWidths` of all inputs by number, those that `enclosure` was made with. */
export function worstCase(
	model: Model,
	output: number,
	enclosure: Enclosure,
	halfWidths: ArrayLike<number>,
): WorstCase {
	const f = lineFunction(model, output);
	const highest = new Float64Array(halfWidths.length);
	const free: number[] = [];
	for (const [input, [low, high]] of enclosure.slopes) {
		if (low >= 0) highest[input] = halfWidths[input]!;
		else if (high <= 0) highest[input] = -halfWidths[input]!;
		else free.push(input);
	}
	const lowest = highest.map((deviation) => -deviation);
	const upper = search(f, highest, free, halfWidths, 1);
	const lower = search(f, lowest, free, halfWidths, -1);
	const exact = free.length === 0 && Number.isFinite(lower) && Number.isFinite(upper);
	return { lower, upper, exact };
}

/** Greatest value of `sign` × f that a bounded search over the free inputs finds, as a value of f. */
function search(
	f: (deviations: Float64Array) => number,
	at: Float64Array,
	free: readonly number[],
	halfWidths: ArrayLike<number>,
	sign: number,
): number {
	let best = sign * f(at);
	const tryAt = (input: number, deviation: number): boolean => {
		const before = at[input]!;
		at[input] = deviation;
		const value = sign * f(at);
		if (value > best || Number.isNaN(best)) {
			best = value;
			return true;
		}
		at[input] = before;
		return false;
	};
	if (free.length <= cornersOf) bestCorner(f, at, free, halfWidths, sign);
	const corner = sign * f(at);
	if (!(corner <= best)) best = corner;
	else for (const input of free) at[input] = 0;
	best = sign * f(at);
	for (let round = 0; round < rounds; round++) {
		let moved = false;
		for (const input of free) {
			const width = halfWidths[input]!;
			for (let k = 0; k < points; k++)
				moved = tryAt(input, width * ((2 * k) / (points - 1) - 1)) || moved;
			// At an end that is still falling towards the middle nothing is left to find; else ever smaller steps are taken.
			const end = Math.abs(at[input]!) === width;
			if (end && !tryAt(input, at[input]! * (1 - 1e-6))) continue;
			for (let step = width / (points - 1); step > 1e-9 * width; step /= 2)
				for (const way of [-step, step])
					moved = tryAt(input, Math.max(-width, Math.min(width, at[input]! + way))) || moved;
		}
		if (!moved) break;
	}
	return sign * best;
}

/** Leaves `at` at the corner of the free inputs where sign × f is greatest. */
function bestCorner(
	f: (deviations: Float64Array) => number,
	at: Float64Array,
	free: readonly number[],
	halfWidths: ArrayLike<number>,
	sign: number,
): void {
	let [best, place] = [-Infinity, 0];
	const go = (corner: number) => {
		free.forEach((input, k) => {
			at[input] = (corner >> k) & 1 ? halfWidths[input]! : -halfWidths[input]!;
		});
	};
	for (let corner = 0; corner < 1 << free.length; corner++) {
		go(corner);
		const value = sign * f(at);
		if (value > best) [best, place] = [value, corner];
	}
	go(place);
}
