import { partials } from './partials';
import { remarksOf } from './remarks';
import { curvatureOf, flat } from './curvature';
import type { Tape } from './tape';
import { evaluateTape, nodesFor } from './values';

/**
 * A line's value with its derivatives by all inputs it depends on, directly or through other lines. A later line is
 * computed from those of its arguments, so that an edit recomputes its dependants alone.
 */
export interface Propagated {
	value: number;
	/** Numbers of the inputs it depends on, ascending. */
	support: Int32Array;
	/** Derivative by each of them. */
	gradient: Float64Array;
	/** Second and third derivatives as `curvatureOf` lays them out; absent where they were not asked or are too many. */
	curvature?: Float64Array;
	/** Bits of `Remark`. */
	remarks: number;
}

const nothing = new Int32Array(0);
const level = new Float64Array(0);

/** A value without doubt. */
export function exact(value: number): Propagated {
	return { value, support: nothing, gradient: level, curvature: flat, remarks: 0 };
}

/**
 * Propagates one line to first order (JCGM 100:2008, 5.1.2) and, where asked, to second.
 * `inputs[k]` is the number, in the note, of the line's own input k; `uncertainties` has the standard uncertainty of
 * each input by that number.
 */
export function propagate(
	tape: Tape,
	args: readonly Propagated[],
	inputs: ArrayLike<number>,
	uncertainties: ArrayLike<number>,
	secondOrder = true,
): Propagated {
	const needed = Math.max(args.length, inputs.length, tape.arguments, tape.inputs);
	if (values.length < needed)
		[values, byArgument, byInput] = [0, 1, 2].map(() => new Float64Array(2 * needed)) as Scratch;
	for (let k = 0; k < args.length; k++) values[k] = args[k]!.value;
	const nodes = nodesFor(tape);
	const value = evaluateTape(tape, values, nodes);
	const support = supportOf(args, inputs);
	if (support.length === 0) return exact(value);

	partials(tape, nodes, byArgument, byInput);
	let remarks = tape.special
		? remarksOf(
				tape,
				nodes,
				args.map((arg) => arg.support.length > 0),
			)
		: 0;
	const gradient = zeros(support.length);
	for (let k = 0; k < args.length; k++) {
		const arg = args[k]!;
		remarks |= arg.remarks;
		const slope = byArgument[k]!;
		if (slope !== 0) addScaled(gradient, support, slope, arg);
	}
	for (let k = 0; k < inputs.length; k++) gradient[placeOf(support, inputs[k]!, 0)]! += byInput[k]!;
	const result: Propagated = { value, support, gradient, remarks };
	if (!secondOrder) return result;
	const curvature = curvatureOf({
		tape,
		args,
		places: args.map((arg) => placesIn(support, arg.support)),
		own: placesIn(support, inputs),
		support,
		uncertainties,
		byArgument,
	});
	if (curvature) result.curvature = curvature;
	return result;
}

/** What is left of the block that gradients are cut from: one of their size costs more to make alone than to fill. */
let block = new Float64Array(0);
const blockLength = 4_096;

function zeros(length: number): Float64Array {
	if (length > blockLength / 8) return new Float64Array(length);
	if (block.length < length) block = new Float64Array(blockLength);
	const cut = block.subarray(0, length);
	block = block.subarray(length);
	return cut;
}

type Scratch = [Float64Array, Float64Array, Float64Array];

/** Values of a line's arguments, and the slopes by them and by its inputs; nothing is kept in them. */
let [values, byArgument, byInput] = [0, 1, 2].map(() => new Float64Array(32)) as Scratch;

/** Adds a multiple of an argument's gradient to that of the line. */
function addScaled(
	into: Float64Array,
	support: Int32Array,
	slope: number,
	{ gradient, support: inner }: Propagated,
): void {
	if (inner === support) for (let i = 0; i < inner.length; i++) into[i]! += slope * gradient[i]!;
	else
		for (let i = 0, to = 0; i < inner.length; i++) {
			to = placeOf(support, inner[i]!, to);
			into[to]! += slope * gradient[i]!;
		}
}

/** All inputs that any argument or the line itself depends on, ascending, each once. */
function supportOf(args: readonly Propagated[], inputs: ArrayLike<number>): Int32Array {
	let union = args[0]?.support ?? nothing;
	for (let k = 1; k < args.length; k++) union = merged(union, args[k]!.support);
	if (inputs.length === 0) return union;
	const own = Int32Array.from(inputs);
	return merged(union, own.length > 1 ? own.sort() : own);
}

/** Union of two ascending lists. The same array where nothing is added, so that later lines need not look for places. */
function merged(x: Int32Array, y: Int32Array): Int32Array {
	if (x === y || includesAll(x, y)) return x;
	if (includesAll(y, x)) return y;
	const all = new Int32Array(x.length + y.length);
	let [i, j, n] = [0, 0, 0];
	while (i < x.length && j < y.length) {
		const [left, right] = [x[i]!, y[j]!];
		all[n++] = left < right ? left : right;
		if (left <= right) i++;
		if (right <= left) j++;
	}
	while (i < x.length) all[n++] = x[i++]!;
	while (j < y.length) all[n++] = y[j++]!;
	return all.slice(0, n);
}

function includesAll(x: Int32Array, y: Int32Array): boolean {
	if (y.length > x.length) return false;
	let from = 0;
	for (let i = 0; i < y.length; i++) {
		from = placeOf(x, y[i]!, from);
		if (from >= x.length || x[from] !== y[i]) return false;
	}
	return true;
}

/** First place of an ascending list, from `from` on, whose member is not below a number. */
function placeOf(list: Int32Array, number: number, from: number): number {
	let [low, high] = [from, list.length];
	while (low < high) {
		const middle = (low + high) >> 1;
		if (list[middle]! < number) low = middle + 1;
		else high = middle;
	}
	return low;
}

const identity = Int32Array.from({ length: 512 }, (_, i) => i);

/** Place in `support` of each of `numbers`. */
function placesIn(support: Int32Array, numbers: ArrayLike<number>): Int32Array {
	if (numbers === support && support.length <= identity.length) return identity;
	const places = new Int32Array(numbers.length);
	for (let i = 0; i < numbers.length; i++) places[i] = placeOf(support, numbers[i]!, 0);
	return places;
}
