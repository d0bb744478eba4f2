import { bounds } from './bounds';
import { Refusal } from './functions/function';
import { isGrid, list, type Grid, type Value } from './values';

/** Applies an operator to numbers member by member; a single number pairs with each member. */
export function zip(a: Value, b: Value, fn: (x: number, y: number) => number): Value {
	if (!isGrid(a) && !isGrid(b)) return fn(Number(a), Number(b));
	if (!isGrid(a))
		return { shape: (b as Grid).shape, data: (b as Grid).data.map((y) => fn(Number(a), y)) };
	if (!isGrid(b)) return { shape: a.shape, data: a.data.map((x) => fn(x, Number(b))) };
	if (a.shape.join() !== b.shape.join())
		throw new Refusal(`The lists differ in size: ${size(a)} and ${size(b)}.`);
	return { shape: a.shape, data: a.data.map((x, i) => fn(x, b.data[i] ?? NaN)) };
}

/** `*` of mathjs: of two lists the scalar product, of matrices the matrix product. */
export function product(a: Value, b: Value): Value {
	if (!isGrid(a) || !isGrid(b)) return zip(a, b, (x, y) => x * y);
	const [rows, inner] =
		a.shape.length === 2 ? [a.shape[0] ?? 0, a.shape[1] ?? 0] : [1, a.data.length];
	const [depth, columns] =
		b.shape.length === 2 ? [b.shape[0] ?? 0, b.shape[1] ?? 0] : [b.data.length, 1];
	if (inner !== depth)
		throw new Refusal(`A product needs ${inner} rows on the right, not ${depth}.`);
	const data = new Float64Array(rows * columns);
	for (let i = 0; i < rows; i++)
		for (let j = 0; j < columns; j++) {
			let sum = 0;
			for (let k = 0; k < inner; k++)
				sum += (a.data[i * inner + k] ?? 0) * (b.data[k * columns + j] ?? 0);
			data[i * columns + j] = sum;
		}
	if (a.shape.length === 1 && b.shape.length === 1) return data[0] ?? 0;
	return a.shape.length === 2 && b.shape.length === 2
		? { shape: [rows, columns], data }
		: list(data);
}

/** Multiplications a product takes, known before it is computed. */
export function productSteps(a: Value, b: Value): number {
	if (!isGrid(a) || !isGrid(b)) return steps(a) + steps(b);
	const columns = b.shape.length === 2 ? (b.shape[1] ?? 1) : 1;
	return a.data.length * columns;
}

export function steps(value: Value): number {
	return isGrid(value) ? value.data.length : 1;
}

/** Members from start to end; the count is checked before anything is made. */
export function range(start: number, step: number, end: number): Grid {
	if (step === 0) throw new Refusal('The step of a range is not zero.');
	const count = Math.max(0, Math.floor((end - start) / step + 1e-9) + 1);
	if (!(count <= bounds.members)) throw new TooLarge(count);
	if (count === 0) throw new Refusal('This range is empty.');
	const data = new Float64Array(count);
	for (let i = 0; i < count; i++) data[i] = start + i * step;
	return list(data);
}

/** More members than a list may have. */
export class TooLarge extends Error {
	constructor(readonly count: number) {
		super('too large');
	}
}

/** Members by their 1-based places; a list of places gives a list. */
export function pick(grid: Grid, places: Value[]): Value {
	if (places.length !== grid.shape.length)
		throw new Refusal(
			`This needs ${grid.shape.length} ${grid.shape.length === 1 ? 'place' : 'places'}, not ${places.length}.`,
		);
	const chosen = places.map((place, dimension) => {
		const length = grid.shape[dimension] ?? 0;
		const wanted = isGrid(place) ? [...place.data] : [Number(place)];
		for (const index of wanted)
			if (!Number.isInteger(index) || index < 1 || index > length)
				throw new Refusal(`There is no place ${index}; the places go from 1 to ${length}.`);
		return wanted.map((index) => index - 1);
	});
	const [first = [], second] = chosen;
	if (!second) {
		const data = Float64Array.from(first, (i) => grid.data[i] ?? NaN);
		return isGrid(places[0] ?? 0) ? list(data) : (data[0] ?? NaN);
	}
	if (first.length * second.length > bounds.members)
		throw new TooLarge(first.length * second.length);
	const columns = grid.shape[1] ?? 1;
	const data = Float64Array.from(
		first.flatMap((i) => second.map((j) => grid.data[i * columns + j] ?? NaN)),
	);
	if (data.length === 1 && !places.some(isGrid)) return data[0] ?? NaN;
	return places.every(isGrid) ? { shape: [first.length, second.length], data } : list(data);
}

function size(grid: Grid): string {
	return grid.shape.join(' × ');
}
