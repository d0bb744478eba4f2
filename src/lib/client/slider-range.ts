/** A slider's ends and the step between its positions, numbers in one unit. */
export interface SliderRange {
	lower: number;
	upper: number;
	step: number;
}

/** Positions that a slider has at least. */
const positions = 200;

/** A range with a step that is 1, 2 or 5 times a power of ten, so that the values on it are short. */
export function rangeOf(lower: number, upper: number): SliderRange {
	const span = upper - lower;
	if (!(span > 0) || !Number.isFinite(span)) return rangeOf(lower - 1, lower + 1);
	const size = 10 ** Math.floor(Math.log10(span / positions));
	const step = [5, 2].map((times) => times * size).find((each) => each <= span / positions) ?? size;
	return { lower, upper, step };
}

/** A range for a value of which nothing is known: half as much to either side, or one unit round zero. */
export function rangeAround(value: number): SliderRange {
	const half = value === 0 ? 1 : Math.abs(value) / 2;
	return rangeOf(value - half, value + half);
}

/** The same range round its middle, so many times as wide, and wide enough for a value. */
export function scaled({ lower, upper }: SliderRange, times: number): SliderRange {
	const [middle, half] = [(lower + upper) / 2, ((upper - lower) / 2) * times];
	return rangeOf(middle - half, middle + half);
}

/** The range, made wider where a value lies outside of it. */
export function including(range: SliderRange, value: number): SliderRange {
	if (value >= range.lower && value <= range.upper) return range;
	return rangeOf(Math.min(range.lower, value), Math.max(range.upper, value));
}

/** The nearest value with a step's digits, inside the range. */
export function snapped({ lower, upper, step }: SliderRange, value: number): number {
	const inside = Math.min(upper, Math.max(lower, value));
	const digits = Math.max(0, -Math.floor(Math.log10(step)));
	const near = Math.round(inside / step) * step;
	const short = Number(near.toFixed(Math.min(100, digits)));
	// The very ends may have more digits than a step.
	return short < lower ? lower : short > upper ? upper : short;
}
