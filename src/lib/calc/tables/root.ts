/** Value and slope of a function at one point. */
export interface Slope {
	value: number;
	derivative: number;
}

/**
 * Where a monotonic function takes a value between those at `lower` and `upper`: Newton's steps, and halving where
 * one would leave the bracket or gains too little. To the last digit that the function itself resolves.
 */
export function findCrossing(
	of: (x: number) => Slope,
	wanted: number,
	lower: number,
	upper: number,
): number {
	const rising = of(upper).value > of(lower).value;
	let low = lower;
	let high = upper;
	let x = low + (high - low) / 2;
	let step = high - low;
	for (let round = 0; round < 200; round++) {
		const { value, derivative } = of(x);
		const miss = value - wanted;
		if (miss === 0) return x;
		if (miss > 0 === rising) high = x;
		else low = x;
		let next = x - miss / derivative;
		if (!(next > low && next < high) || Math.abs(next - x) > step / 2)
			next = low + (high - low) / 2;
		step = Math.abs(next - x);
		if (next === x || next === low || next === high) return nearest(of, wanted, [x, low, high]);
		x = next;
	}
	return x;
}

function nearest(of: (x: number) => Slope, wanted: number, candidates: number[]): number {
	const misses = candidates.map((x) => Math.abs(of(x).value - wanted));
	return candidates[misses.indexOf(Math.min(...misses))]!;
}
