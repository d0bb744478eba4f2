import type { Propagated } from './propagate';
import { slopeSeries } from './series';
import type { Tape } from './tape';

/** Inputs of one line beyond which second order is not computed: its cost grows with their square. */
const curvatureLimit = 48;

/** Curvature of a value that is linear in all its inputs. */
export const flat = new Float64Array(0);

interface Line {
	tape: Tape;
	args: readonly Propagated[];
	/** Places in `support` of what each argument depends on, and of the line's own inputs. */
	places: readonly Int32Array[];
	own: Int32Array;
	support: Int32Array;
	uncertainties: ArrayLike<number>;
	byArgument: Float64Array;
}

/**
 * Second derivatives f_ij u_i u_j at `[j n + i]`, and third derivatives f_ijj u_i u_j² at `[n² + j n + i]`, of a line
 * that depends on n inputs. They are in units of the line's value, so that differences of scale cancel.
 */
export function curvatureOf(line: Line): Float64Array | undefined {
	const n = line.support.length;
	if (line.args.some((arg) => !arg.curvature)) return undefined;
	const bent = line.args.some((arg) => arg.curvature !== flat);
	if (line.tape.linear && !bent) return flat;
	if (n > curvatureLimit) return undefined;
	const result = new Float64Array(2 * n * n);
	if (line.tape.linear) addLinear(line, result);
	else {
		const local = localSlopes(line);
		for (let j = 0; j < n; j++) addColumn(line, j, result, local);
	}
	return result;
}

function addLinear({ args, places, support, byArgument }: Line, into: Float64Array): void {
	const n = support.length;
	args.forEach(({ curvature = flat, support: inner }, k) => {
		if (curvature === flat) return;
		const [m, place, slope] = [inner.length, places[k]!, byArgument[k]!];
		for (let j = 0; j < m; j++)
			for (let i = 0; i < m; i++) {
				const to = place[j]! * n + place[i]!;
				into[to]! += slope * curvature[j * m + i]!;
				into[n * n + to]! += slope * curvature[m * m + j * m + i]!;
			}
	});
}

/** Scratch for the series of arguments and inputs of a line; grown when a line has more. */
let series = [0, 1, 2, 3].map(() => new Float64Array(48));

/** Second and third derivatives of a line by what it is computed from directly: arguments first, then its own inputs. */
interface Local {
	count: number;
	/** f_kl at `[k count + l]`. */
	second: Float64Array;
	/** f_klm at `[(k count + l) count + m]`. */
	third: Float64Array;
}

/**
 * The derivatives of a line by its arguments and inputs, from passes along them and along their pairs. Undefined where
 * one pass for each input of the note is less work.
 */
function localSlopes({ tape, args, own, support }: Line): Local | undefined {
	const count = args.length + own.length;
	if ((count * (count + 1)) / 2 >= support.length || count > varying.length) return undefined;
	const second = new Float64Array(count * count);
	const third = new Float64Array(count ** 3);
	const { argSeries, inputSeries, byArgument, byInput } = seriesFor(tape, args, own);
	const along = (l: number, m: number) => {
		for (let k = 0; k < count; k++) {
			const [into, at] = k < args.length ? [argSeries, k] : [inputSeries, k - args.length];
			into[3 * at] = k < args.length ? args[k]!.value : 0;
			into[3 * at + 1] = k === l || k === m ? 1 : 0;
			into[3 * at + 2] = 0;
		}
		slopeSeries(tape, argSeries, inputSeries, byArgument, byInput);
	};
	const found = (k: number, order: number) =>
		k < args.length ? byArgument[3 * k + order]! : byInput[3 * (k - args.length) + order]!;
	for (let l = 0; l < count; l++) {
		along(l, l);
		for (let k = 0; k < count; k++) {
			second[k * count + l] = found(k, 1);
			third[(k * count + l) * count + l] = 2 * found(k, 2);
		}
	}
	for (let l = 0; l < count; l++)
		for (let m = l + 1; m < count; m++) {
			along(l, m);
			for (let k = 0; k < count; k++) {
				const row = k * count;
				const alone = third[(row + l) * count + l]! + third[(row + m) * count + m]!;
				const mixed = found(k, 2) - 0.5 * alone;
				third[(row + l) * count + m] = mixed;
				third[(row + m) * count + l] = mixed;
			}
		}
	return { count, second, third };
}

/** Places of what varies along a direction. */
const varying = new Int32Array(64);

/** Series of the slopes along a direction, put together from the derivatives of the line. */
function combine(
	{ count, second, third }: Local,
	argSeries: Float64Array,
	inputSeries: Float64Array,
	byArgument: Float64Array,
	byInput: Float64Array,
	given: number,
): void {
	let some = 0;
	for (let l = 0; l < count; l++) {
		const x = l < given ? argSeries : inputSeries;
		const at = 3 * (l < given ? l : l - given);
		if (x[at + 1] !== 0 || x[at + 2] !== 0) varying[some++] = l;
	}
	for (let k = 0; k < count; k++) {
		let [first, next] = [0, 0];
		for (let v = 0; v < some; v++) {
			const l = varying[v]!;
			const x = l < given ? argSeries : inputSeries;
			const at = 3 * (l < given ? l : l - given);
			const x1 = x[at + 1]!;
			const slope = second[k * count + l]!;
			first += slope * x1;
			next += slope * x[at + 2]!;
			const row = (k * count + l) * count;
			for (let w = 0; w < some; w++) {
				const m = varying[w]!;
				const y1 = m < given ? argSeries[3 * m + 1]! : inputSeries[3 * (m - given) + 1]!;
				next += 0.5 * third[row + m]! * x1 * y1;
			}
		}
		const into = k < given ? byArgument : byInput;
		const to = 3 * (k < given ? k : k - given);
		into[to + 1] = first;
		into[to + 2] = next;
	}
}

/** Scratch that is long enough for a line. */
function seriesFor(tape: Tape, args: readonly Propagated[], own: Int32Array) {
	const needed = 3 * Math.max(args.length, own.length, tape.arguments, tape.inputs);
	if (series[0]!.length < needed) series = series.map(() => new Float64Array(2 * needed));
	const [argSeries, inputSeries, byArgument, byInput] = series as [
		Float64Array,
		Float64Array,
		Float64Array,
		Float64Array,
	];
	return { argSeries, inputSeries, byArgument, byInput };
}

function addColumn(line: Line, j: number, into: Float64Array, local: Local | undefined): void {
	const { tape, args, places, own, support, uncertainties, byArgument: slopes } = line;
	const n = support.length;
	const { argSeries, inputSeries, byArgument, byInput } = seriesFor(tape, args, own);
	const direction = support[j]!;
	const scale = uncertainties[direction]!;
	// Place of the direction among the inputs of each argument, -1 where it does not depend on it.
	const columns = args.map((arg, k) => {
		const { curvature = flat, gradient, support: inner, value } = arg;
		const column = inner === support ? j : places[k]!.subarray(0, inner.length).indexOf(j);
		argSeries[3 * k] = value;
		argSeries[3 * k + 1] = column < 0 ? 0 : gradient[column]! * scale;
		argSeries[3 * k + 2] =
			column < 0 || curvature === flat ? 0 : 0.5 * curvature[column * (inner.length + 1)]!;
		return column;
	});
	for (let k = 0; k < own.length; k++) {
		inputSeries[3 * k] = 0;
		inputSeries[3 * k + 1] = own[k] === j ? scale : 0;
		inputSeries[3 * k + 2] = 0;
	}
	if (local) {
		combine(local, argSeries, inputSeries, byArgument, byInput, args.length);
		for (let k = 0; k < args.length; k++) byArgument[3 * k] = slopes[k]!;
	} else slopeSeries(tape, argSeries, inputSeries, byArgument, byInput);

	const row = j * n;
	const third = n * n + row;
	for (let k = 0; k < args.length; k++) {
		const p0 = byArgument[3 * k]!;
		const p1 = byArgument[3 * k + 1]!;
		const p2 = byArgument[3 * k + 2]!;
		const { curvature = flat, gradient, support: inner } = args[k]!;
		const place = places[k]!;
		const m = inner.length;
		const from = columns[k]! * m;
		const bent = columns[k]! >= 0 && curvature !== flat;
		for (let i = 0; i < m; i++) {
			const to = place[i]!;
			const slope = gradient[i]! * uncertainties[inner[i]!]!;
			const second = bent ? curvature[from + i]! : 0;
			into[row + to]! += p1 * slope + p0 * second;
			into[third + to]! +=
				2 * (p2 * slope + p1 * second) + (bent ? p0 * curvature[m * m + from + i]! : 0);
		}
	}
	for (let k = 0; k < own.length; k++) {
		const to = own[k]!;
		const slope = uncertainties[support[to]!]!;
		into[row + to]! += byInput[3 * k + 1]! * slope;
		into[third + to]! += 2 * byInput[3 * k + 2]! * slope;
	}
}
