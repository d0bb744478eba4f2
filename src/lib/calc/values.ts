/** Numbers in rows: one dimension for a list, two for a matrix. */
export interface Grid {
	readonly shape: readonly number[];
	readonly data: Float64Array;
}

/** What an expression computes to. Numbers are in SI units; a series is its name. */
export type Value = number | boolean | string | Grid;

export function isGrid(value: Value): value is Grid {
	return typeof value === 'object';
}

export function list(data: Float64Array): Grid {
	return { shape: [data.length], data };
}

/** Members of a number or of a grid. */
export function members(value: Value): Float64Array {
	if (isGrid(value)) return value.data;
	return Float64Array.of(Number(value));
}

/** Applies a function to each number. */
export function map(value: Value, fn: (x: number) => number): Value {
	return isGrid(value) ? { shape: value.shape, data: value.data.map(fn) } : fn(Number(value));
}
