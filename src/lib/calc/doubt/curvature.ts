import type { Propagated } from './propagate';
import { slopeSeries } from './series';
import type { Tape } from './tape';

/** Inputs of one line beyond which second order is not computed: its cost grows with their square. */
export const curvatureLimit = 48;

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
	else for (let j = 0; j < n; j++) addColumn(line, j, result);
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

function addColumn(line: Line, j: number, into: Float64Array): void {
	const { tape, args, places, own, support, uncertainties } = line;
	const n = support.length;
	const needed = 3 * Math.max(args.length, own.length, tape.arguments, tape.inputs);
	if (series[0]!.length < needed) series = series.map(() => new Float64Array(2 * needed));
	const [argSeries, inputSeries, byArgument, byInput] = series as [
		Float64Array,
		Float64Array,
		Float64Array,
		Float64Array,
	];
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
	slopeSeries(tape, argSeries, inputSeries, byArgument, byInput);

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
