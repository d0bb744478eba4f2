/** Values in ascending order, in a new array; they must be finite. Bell-shaped samples go in time linear in their number. */
export function sorted(values: Float64Array): Float64Array {
	const n = values.length;
	let [low, high] = [Infinity, -Infinity];
	for (let i = 0; i < n; i++) {
		const value = values[i]!;
		if (value < low) low = value;
		if (value > high) high = value;
	}
	const buckets = Math.ceil(n / 4);
	const scale = buckets / (high - low);
	if (n < 4_000 || !(scale > 0) || !Number.isFinite(scale)) return values.slice().sort();

	const starts = new Uint32Array(buckets + 2);
	for (let i = 0; i < n; i++)
		starts[Math.min(buckets - 1, Math.floor((values[i]! - low) * scale)) + 2]!++;
	for (let k = 2; k < starts.length; k++) starts[k]! += starts[k - 1]!;
	const result = new Float64Array(n);
	for (let i = 0; i < n; i++) {
		const value = values[i]!;
		result[starts[Math.min(buckets - 1, Math.floor((value - low) * scale)) + 1]!++] = value;
	}
	for (let k = 0; k < buckets; k++) sortRange(result, starts[k]!, starts[k + 1]!);
	return result;
}

/** Sorts part of an array in place: short ones by insertion, long ones by the engine. */
function sortRange(values: Float64Array, from: number, to: number): void {
	if (to - from > 48) {
		values.subarray(from, to).sort();
		return;
	}
	for (let i = from + 1; i < to; i++) {
		const value = values[i]!;
		let j = i - 1;
		for (; j >= from && values[j]! > value; j--) values[j + 1] = values[j]!;
		values[j + 1] = value;
	}
}
