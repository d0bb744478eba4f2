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
	const values = new Float64Array(args.length);
	for (let k = 0; k < args.length; k++) values[k] = args[k]!.value;
	const nodes = nodesFor(tape);
	const value = evaluateTape(tape, values, nodes);
	const support = supportOf(args, inputs);
	if (support.length === 0) return exact(value);

	const byArgument = new Float64Array(Math.max(args.length, tape.arguments));
	const byInput = new Float64Array(Math.max(inputs.length, tape.inputs));
	partials(tape, nodes, byArgument, byInput);
	let remarks = remarksOf(
		tape,
		nodes,
		args.map((arg) => arg.support.length > 0),
	);
	const gradient = new Float64Array(support.length);
	const places = args.map((arg) => placesIn(support, arg.support));
	for (let k = 0; k < args.length; k++) {
		remarks |= args[k]!.remarks;
		const slope = byArgument[k]!;
		if (slope === 0) continue;
		const inner = args[k]!.gradient;
		const place = places[k]!;
		for (let i = 0; i < inner.length; i++) gradient[place[i]!]! += slope * inner[i]!;
	}
	const own = placesIn(support, inputs);
	for (let k = 0; k < inputs.length; k++) gradient[own[k]!]! += byInput[k]!;
	const result: Propagated = { value, support, gradient, remarks };
	if (secondOrder) {
		const curvature = curvatureOf({
			tape,
			args,
			places,
			own,
			support,
			uncertainties,
			byArgument,
		});
		if (curvature) result.curvature = curvature;
	}
	return result;
}

/** All inputs that any argument or the line itself depends on, ascending, each once. */
function supportOf(args: readonly Propagated[], inputs: ArrayLike<number>): Int32Array {
	let union = args[0]?.support ?? nothing;
	for (let k = 1; k < args.length; k++) union = merged(union, args[k]!.support);
	return inputs.length > 0 ? merged(union, Int32Array.from(inputs).sort()) : union;
}

function merged(x: Int32Array, y: Int32Array): Int32Array {
	if (x === y || y.length === 0) return x;
	if (x.length === 0) return y;
	const all = new Int32Array(x.length + y.length);
	let [i, j, n] = [0, 0, 0];
	while (i < x.length || j < y.length) {
		const [left, right] = [x[i] ?? Infinity, y[j] ?? Infinity];
		all[n++] = Math.min(left, right);
		if (left <= right) i++;
		if (right <= left) j++;
	}
	// Keeping the same array where nothing is added lets later lines skip the search for places.
	return n === x.length ? x : n === y.length ? y : all.slice(0, n);
}

const identity = Int32Array.from({ length: 512 }, (_, i) => i);

/** Place in `support` of each of `numbers`. */
function placesIn(support: Int32Array, numbers: ArrayLike<number>): Int32Array {
	if (numbers === support && support.length <= identity.length) return identity;
	const places = new Int32Array(numbers.length);
	let from = 0;
	for (let i = 0; i < numbers.length; i++) {
		const number = numbers[i]!;
		if (i > 0 && number < numbers[i - 1]!) from = 0;
		while (support[from]! < number) from++;
		places[i] = from;
	}
	return places;
}
