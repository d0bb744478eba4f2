import { Op, unaryValue, binaryValue } from './operations';
import { externalSlopes } from './partials';
import { powerSlopes, unarySlopes } from './slopes';
import type { Tape } from './tape';

/*
 * Truncated power series x(t) = x0 + x1 t + x2 t² of every node along one direction, and the series of the slopes by
 * arguments and inputs along it. One such pass per input gives its column of second derivatives and the third
 * derivatives f_ijj that JCGM 100:2008, 5.1.2 note, asks for. Three numbers a node: `nodes[3 i + k]`.
 */
let nodes = new Float64Array(768);
let weights = new Float64Array(768);
/** Series of the slope by the first and by the second operand, three numbers each. */
let slopes = new Float64Array(1536);

const d = new Float64Array(3);
const one = Float64Array.of(1, 0, 0);
const [r, s, t, u] = [0, 1, 2, 3].map(() => new Float64Array(3)) as [
	Float64Array,
	Float64Array,
	Float64Array,
	Float64Array,
];

/**
 * Runs a tape along one direction. `args` and `inputs` hold three series coefficients each; the series of the slopes
 * by them are written to `byArgument` and `byInput`, three numbers each.
 */
export function slopeSeries(
	tape: Tape,
	args: Float64Array,
	inputs: Float64Array,
	byArgument: Float64Array,
	byInput: Float64Array,
): void {
	forward(tape, args, inputs);
	backward(tape, byArgument, byInput);
}

function forward(tape: Tape, args: Float64Array, inputs: Float64Array): void {
	const { ops, a, b, c } = tape;
	if (nodes.length < 3 * ops.length) {
		nodes = new Float64Array(6 * ops.length);
		weights = new Float64Array(6 * ops.length);
		slopes = new Float64Array(12 * ops.length);
	}
	for (let i = 0; i < ops.length; i++) {
		const op = ops[i]!;
		const x = a[i]!;
		if (op === Op.constant) set(nodes, 3 * i, tape.numbers[i]!, 0, 0);
		else if (op === Op.argument)
			set(nodes, 3 * i, args[3 * x]!, args[3 * x + 1]!, args[3 * x + 2]!);
		else if (op === Op.input)
			set(nodes, 3 * i, inputs[3 * x]!, inputs[3 * x + 1]!, inputs[3 * x + 2]!);
		else if (op < Op.add) unary(op, i, 3 * x);
		else if (op < Op.select) binary(op, i, 3 * x, 3 * b[i]!);
		else if (op === Op.select) {
			const from = 3 * (nodes[3 * x]! !== 0 ? b[i]! : c[i]!);
			set(nodes, 3 * i, nodes[from]!, nodes[from + 1]!, nodes[from + 2]!);
		} else call(tape, i);
	}
}

function backward(tape: Tape, byArgument: Float64Array, byInput: Float64Array): void {
	const { ops, a, b, c } = tape;
	const last = ops.length - 1;
	weights.fill(0, 0, 3 * ops.length);
	weights[3 * last] = 1;
	byArgument.fill(0);
	byInput.fill(0);
	for (let i = last; i >= 0; i--) {
		const w = 3 * i;
		if (weights[w] === 0 && weights[w + 1] === 0 && weights[w + 2] === 0) continue;
		const op = ops[i]!;
		const x = a[i]!;
		if (op === Op.argument) accumulate(byArgument, 3 * x, w, one, 0);
		else if (op === Op.input) accumulate(byInput, 3 * x, w, one, 0);
		else if (op > Op.input && op < Op.select) {
			accumulate(weights, 3 * x, w, slopes, 6 * i);
			if (op >= Op.add) accumulate(weights, 3 * b[i]!, w, slopes, 6 * i + 3);
		} else if (op === Op.select)
			accumulate(weights, 3 * (nodes[3 * x]! !== 0 ? b[i]! : c[i]!), w, one, 0);
		else if (op === Op.external) {
			const { operands } = tape.calls[x]!;
			const by = callSeries(tape, i);
			for (let k = 0; k < operands.length; k++) accumulate(weights, 3 * operands[k]!, w, by, 3 * k);
		}
	}
}

function unary(op: number, i: number, x: number): void {
	const [x0, x1, x2] = [nodes[x]!, nodes[x + 1]!, nodes[x + 2]!];
	const value = unaryValue(op, x0);
	unarySlopes(op, x0, value, d);
	throughSlopes(i, value, x1, x2);
}

/** A function of one operand from its value and `d`, its three derivatives. */
function throughSlopes(i: number, value: number, x1: number, x2: number): void {
	const [d1, d2, d3] = [d[0]!, d[1]!, d[2]!];
	// An infinite derivative along a direction in which nothing moves stays out of the higher terms.
	const moves = x1 !== 0 || x2 !== 0;
	const p1 = moves ? d2 * x1 : 0;
	const p2 = moves ? d2 * x2 + 0.5 * d3 * x1 * x1 : 0;
	set(slopes, 6 * i, d1, p1, p2);
	set(slopes, 6 * i + 3, 0, 0, 0);
	set(nodes, 3 * i, value, moves ? d1 * x1 : 0, moves ? d1 * x2 + 0.5 * d2 * x1 * x1 : 0);
}

function binary(op: number, i: number, x: number, y: number): void {
	const p = 6 * i;
	const q = p + 3;
	const [x0, y0] = [nodes[x]!, nodes[y]!];
	const value = binaryValue(op, x0, y0);
	switch (op) {
		case Op.add:
		case Op.sub:
			set(slopes, p, 1, 0, 0);
			set(slopes, q, op === Op.add ? 1 : -1, 0, 0);
			break;
		case Op.mul:
			set(slopes, p, y0, nodes[y + 1]!, nodes[y + 2]!);
			set(slopes, q, x0, nodes[x + 1]!, nodes[x + 2]!);
			break;
		case Op.div:
			load(s, x);
			load(t, y);
			reciprocal(r, t);
			times(s, s, r);
			times(s, s, r);
			set(slopes, p, r[0]!, r[1]!, r[2]!);
			set(slopes, q, -s[0]!, -s[1]!, -s[2]!);
			break;
		case Op.pow:
		case Op.powi:
			if (nodes[y + 1] === 0 && nodes[y + 2] === 0) {
				powerSlopes(x0, y0, d);
				throughSlopes(i, value, nodes[x + 1]!, nodes[x + 2]!);
				if (op === Op.powi || x0 <= 0) return;
			}
			power(x, y, value, p, q);
			break;
		case Op.atan2:
		case Op.hypot:
			load(s, x);
			load(t, y);
			times(r, s, s);
			times(u, t, t);
			for (let k = 0; k < 3; k++) r[k]! += u[k]!;
			if (op === Op.hypot) root(r, value);
			reciprocal(u, r);
			times(s, s, u);
			times(t, t, u);
			if (op === Op.hypot) {
				set(slopes, p, s[0]!, s[1]!, s[2]!);
				set(slopes, q, t[0]!, t[1]!, t[2]!);
			} else {
				set(slopes, p, t[0]!, t[1]!, t[2]!);
				set(slopes, q, -s[0]!, -s[1]!, -s[2]!);
			}
			break;
		case Op.mod:
			set(slopes, p, 1, 0, 0);
			set(slopes, q, y0 === 0 ? 0 : -Math.floor(x0 / y0), 0, 0);
			break;
		default: {
			const first = op === Op.min ? x0 <= y0 : op === Op.max && x0 >= y0;
			const second = (op === Op.min || op === Op.max) && !first;
			set(slopes, p, first ? 1 : 0, 0, 0);
			set(slopes, q, second ? 1 : 0, 0, 0);
		}
	}
	// v' = p x' + q y', term by term.
	const [x1, y1] = [nodes[x + 1]!, nodes[y + 1]!];
	set(
		nodes,
		3 * i,
		value,
		slopes[p]! * x1 + slopes[q]! * y1,
		slopes[p]! * nodes[x + 2]! +
			slopes[q]! * nodes[y + 2]! +
			0.5 * (slopes[p + 1]! * x1 + slopes[q + 1]! * y1),
	);
}

/** Slopes of x^y by both, as v y / x and v log x with v = exp(y log x). */
function power(x: number, y: number, value: number, p: number, q: number): void {
	load(s, x);
	load(t, y);
	reciprocal(r, s);
	const log1 = s[1]! * r[0]!;
	const log2 = s[2]! * r[0]! - 0.5 * log1 * log1;
	set(s, 0, Math.log(s[0]!), log1, log2);
	times(u, t, s);
	set(u, 0, value, value * u[1]!, value * (u[2]! + 0.5 * u[1]! * u[1]!));
	times(s, s, u);
	times(t, t, u);
	times(t, t, r);
	set(slopes, p, t[0]!, t[1]!, t[2]!);
	set(slopes, q, s[0]!, s[1]!, s[2]!);
}

function call(tape: Tape, i: number): void {
	const { external, operands } = tape.calls[tape.a[i]!]!;
	const by = callSeries(tape, i);
	let [v1, v2] = [0, 0];
	for (let k = 0; k < operands.length; k++) {
		const x = 3 * operands[k]!;
		v1 += by[3 * k]! * nodes[x + 1]!;
		v2 += by[3 * k]! * nodes[x + 2]! + 0.5 * by[3 * k + 1]! * nodes[x + 1]!;
	}
	set(nodes, 3 * i, external.value(at(operands, 0)), v1, v2);
}

/** How far along the direction, in standard uncertainties, the slopes of an external function are compared. */
const reach = 0.25;

/** Series of an external function's slopes: the slopes themselves, their change by differences along the direction. */
function callSeries(tape: Tape, i: number): Float64Array {
	const { external, operands } = tape.calls[tape.a[i]!]!;
	const series = new Float64Array(3 * operands.length);
	const here = externalSlopes(external, at(operands, 0));
	const ahead = externalSlopes(external, at(operands, reach));
	const behind = externalSlopes(external, at(operands, -reach));
	for (let k = 0; k < operands.length; k++) {
		series[3 * k] = here[k]!;
		series[3 * k + 1] = (ahead[k]! - behind[k]!) / (2 * reach);
		series[3 * k + 2] = (ahead[k]! - 2 * here[k]! + behind[k]!) / (2 * reach * reach);
	}
	return series;
}

function at(operands: Int32Array, way: number): Float64Array {
	const values = new Float64Array(operands.length);
	for (let k = 0; k < operands.length; k++) {
		const x = 3 * operands[k]!;
		values[k] = nodes[x]! + way * (nodes[x + 1]! + way * nodes[x + 2]!);
	}
	return values;
}

function accumulate(
	into: Float64Array,
	place: number,
	weight: number,
	slope: Float64Array,
	from: number,
): void {
	const [w0, w1, w2] = [weights[weight]!, weights[weight + 1]!, weights[weight + 2]!];
	const [p0, p1, p2] = [slope[from]!, slope[from + 1]!, slope[from + 2]!];
	into[place]! += w0 * p0;
	into[place + 1]! += w0 * p1 + w1 * p0;
	into[place + 2]! += w0 * p2 + w1 * p1 + w2 * p0;
}

function set(into: Float64Array, place: number, x0: number, x1: number, x2: number): void {
	into[place] = x0;
	into[place + 1] = x1;
	into[place + 2] = x2;
}

function load(into: Float64Array, node: number): void {
	set(into, 0, nodes[node]!, nodes[node + 1]!, nodes[node + 2]!);
}

function times(into: Float64Array, x: Float64Array, y: Float64Array): void {
	const [x0, x1, x2, y0, y1, y2] = [x[0]!, x[1]!, x[2]!, y[0]!, y[1]!, y[2]!];
	set(into, 0, x0 * y0, x0 * y1 + x1 * y0, x0 * y2 + x1 * y1 + x2 * y0);
}

function reciprocal(into: Float64Array, x: Float64Array): void {
	const first = 1 / x[0]!;
	const second = -x[1]! * first * first;
	set(into, 0, first, second, -first * (x[2]! * first + x[1]! * second));
}

/** Replaces the series by that of its square root, whose first term is `value`. */
function root(x: Float64Array, value: number): void {
	const first = (0.5 * x[1]!) / value;
	set(x, 0, value, first, (0.5 * (x[2]! - first * first)) / value);
}
