import { splitter, type Wide } from './double-double';

/** A column of wide numbers, in two flat arrays. */
export interface Column {
	hi: Float64Array;
	lo: Float64Array;
}

export function column(length: number): Column {
	return { hi: new Float64Array(length), lo: new Float64Array(length) };
}

export function fromNumbers(values: readonly number[]): Column {
	return { hi: Float64Array.from(values), lo: new Float64Array(values.length) };
}

export function copy(from: Column): Column {
	return { hi: from.hi.slice(), lo: from.lo.slice() };
}

/** Member of a column; zero beyond its end. */
export function at(values: Column, index: number): Wide {
	return { hi: values.hi[index] ?? 0, lo: values.lo[index] ?? 0 };
}

export function put(values: Column, index: number, value: Wide): void {
	values.hi[index] = value.hi;
	values.lo[index] = value.lo;
}

// The two loops below take nearly all the time of a fit. They are double-double.ts written out, so that no object is
// made for each member.

/** Scalar product from the member `from` on. */
export function dot(a: Column, b: Column, from = 0): Wide {
	let sum = 0;
	let rest = 0;
	for (let i = from; i < a.hi.length; i++) {
		const x = a.hi[i]!;
		const y = b.hi[i]!;
		const product = x * y;
		const xUp = splitter * x;
		const xTop = xUp - (xUp - x);
		const xRest = x - xTop;
		const yUp = splitter * y;
		const yTop = yUp - (yUp - y);
		const yRest = y - yTop;
		const error = xTop * yTop - product + xTop * yRest + xRest * yTop + xRest * yRest;
		const next = sum + product;
		const part = next - sum;
		rest += sum - (next - part) + (product - part) + (error + (x * b.lo[i]! + a.lo[i]! * y));
		sum = next;
	}
	const hi = sum + rest;
	return { hi, lo: rest - (hi - sum) };
}

/** Takes `factor` times `from` off `values`, in place, from the member `start` on. */
export function subtractMultiple(values: Column, factor: Wide, from: Column, start = 0): void {
	const x = factor.hi;
	const xUp = splitter * x;
	const xTop = xUp - (xUp - x);
	const xRest = x - xTop;
	for (let i = start; i < values.hi.length; i++) {
		const y = from.hi[i]!;
		const product = x * y;
		const yUp = splitter * y;
		const yTop = yUp - (yUp - y);
		const yRest = y - yTop;
		const error =
			xTop * yTop -
			product +
			xTop * yRest +
			xRest * yTop +
			xRest * yRest +
			(x * from.lo[i]! + factor.lo * y);
		const before = values.hi[i]!;
		const next = before - product;
		const part = next - before;
		const lost = before - (next - part) + (-product - part) + (values.lo[i]! - error);
		const hi = next + lost;
		values.hi[i] = hi;
		values.lo[i] = lost - (hi - next);
	}
}
