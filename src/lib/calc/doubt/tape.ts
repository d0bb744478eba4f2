import {
	arity,
	binaryValue,
	isSpecial,
	Op,
	unaryValue,
	type Binary,
	type Unary,
} from './operations';

/**
 * A function that a tape calls: a curve, a table, a search. It must be pure. What it is uncertain by comes in as
 * operands of its own (a curve's coefficients, each an input added to its estimate).
 */
export interface External {
	name: string;
	value(operands: Float64Array): number;
	/** Writes the derivative by each operand into `into`; without it differences are taken. */
	slopes?(operands: Float64Array, into: Float64Array): void;
}

/**
 * One worked line as straight-line code over numbers in coherent units. Node i computes `ops[i]` of the earlier nodes
 * `a[i]`, `b[i]`, `c[i]`; the last node is the line's value. `a` is the number of the argument, of the line's own
 * input (a deviation that is zero at the estimate), or of the external call. Never changed once built.
 */
export interface Tape {
	ops: Uint8Array;
	a: Int32Array;
	b: Int32Array;
	c: Int32Array;
	/** Value of constants, 0 elsewhere. */
	numbers: Float64Array;
	calls: { external: External; operands: Int32Array }[];
	/** How many arguments and inputs the line has, used by the tape or not. */
	arguments: number;
	inputs: number;
	/** Built of sums and constant factors alone. */
	linear: boolean;
	/** Contains an operation that jumps or has a corner, or an external call. */
	special: boolean;
}

/** A node of the tape being built. */
export type Node = number;

/** Builds a tape, folding constants and reusing nodes that compute the same. */
export class TapeBuilder {
	#ops: number[] = [];
	#a: number[] = [];
	#b: number[] = [];
	#c: number[] = [];
	#numbers: number[] = [];
	#calls: Tape['calls'] = [];
	/** Nodes by what they compute, so that nothing is computed twice. */
	#known = new Map<number, Node>();
	#constants = new Map<number, Node>();
	#arguments = 0;
	#inputs = 0;

	constant(value: number): Node {
		// A map takes 0 and −0 for the same.
		const known = Object.is(value, -0) ? undefined : this.#constants.get(value);
		if (known !== undefined) return known;
		const node = this.#add(Op.constant, 0, 0, 0, value);
		if (!Object.is(value, -0)) this.#constants.set(value, node);
		return node;
	}

	/** The value of another line: argument `index` of this one. */
	argument(index: number): Node {
		this.#arguments = Math.max(this.#arguments, index + 1);
		return this.#node(Op.argument, index);
	}

	/** The deviation of the line's own doubtful input `index`, to be added to its estimate. */
	input(index: number): Node {
		this.#inputs = Math.max(this.#inputs, index + 1);
		return this.#node(Op.input, index);
	}

	unary(name: Unary, x: Node): Node {
		const op = Op[name];
		if (this.#isConstant(x)) return this.constant(unaryValue(op, this.#numbers[x]!));
		return this.#node(op, x);
	}

	/** A power with a whole constant exponent becomes `powi` by itself. */
	binary(name: Binary, x: Node, y: Node): Node {
		let op: number = Op[name];
		if (this.#isConstant(x) && this.#isConstant(y))
			return this.constant(binaryValue(op, this.#numbers[x]!, this.#numbers[y]!));
		if (op === Op.powi && !this.#isConstant(y)) op = Op.pow;
		if (op === Op.pow && this.#isConstant(y) && Number.isInteger(this.#numbers[y]!)) op = Op.powi;
		return this.#node(op, x, y);
	}

	/** `yes` where the condition is not zero, else `no`. */
	select(condition: Node, yes: Node, no: Node): Node {
		if (this.#isConstant(condition)) return this.#numbers[condition] !== 0 ? yes : no;
		if (yes === no) return yes;
		return this.#add(Op.select, condition, yes, no);
	}

	call(external: External, operands: readonly Node[]): Node {
		if (operands.every((operand) => this.#isConstant(operand)))
			return this.constant(external.value(Float64Array.from(operands, (i) => this.#numbers[i]!)));
		this.#calls.push({ external, operands: Int32Array.from(operands) });
		return this.#add(Op.external, this.#calls.length - 1);
	}

	/** Keeps what `out` needs; the builder can go on being used for other tapes. */
	finish(out: Node): Tape {
		const used = new Uint8Array(out + 1);
		used[out] = 1;
		let count = 0;
		for (let i = out; i >= 0; i--) {
			if (!used[i]) continue;
			count++;
			const operands = arity(this.#ops[i]!);
			if (operands > 0) used[this.#a[i]!] = 1;
			if (operands > 1) used[this.#b[i]!] = 1;
			if (operands > 2) used[this.#c[i]!] = 1;
			if (this.#ops[i] === Op.external)
				for (const operand of this.#calls[this.#a[i]!]!.operands) used[operand] = 1;
		}
		const place = new Int32Array(out + 1);
		const calls: Tape['calls'] = [];
		const tape = {
			ops: new Uint8Array(count),
			a: new Int32Array(count),
			b: new Int32Array(count),
			c: new Int32Array(count),
			numbers: new Float64Array(count),
		};
		let [linear, special] = [true, false];
		for (let i = 0, k = 0; i <= out; i++) {
			if (!used[i]) continue;
			const op = this.#ops[i]!;
			const operands = arity(op);
			place[i] = k;
			tape.ops[k] = op;
			tape.numbers[k] = this.#numbers[i]!;
			tape.a[k] = operands > 0 ? place[this.#a[i]!]! : this.#a[i]!;
			if (operands > 1) tape.b[k] = place[this.#b[i]!]!;
			if (operands > 2) tape.c[k] = place[this.#c[i]!]!;
			if (op === Op.external) {
				const call = this.#calls[this.#a[i]!]!;
				const moved = call.operands.map((operand) => place[operand]!);
				tape.a[k] = calls.push({ external: call.external, operands: moved }) - 1;
			}
			linear &&= this.#isLinear(i);
			special ||= isSpecial(op);
			k++;
		}
		return { ...tape, calls, arguments: this.#arguments, inputs: this.#inputs, linear, special };
	}

	#isConstant(node: Node): boolean {
		return this.#ops[node] === Op.constant;
	}

	#isLinear(i: Node): boolean {
		switch (this.#ops[i]) {
			case Op.mul:
				return this.#isConstant(this.#a[i]!) || this.#isConstant(this.#b[i]!);
			case Op.div:
				return this.#isConstant(this.#b[i]!);
			case Op.neg:
			case Op.add:
			case Op.sub:
				return true;
			default:
				return this.#ops[i]! <= Op.input;
		}
	}

	/** A node of at most two operands; the same one where there is one already. */
	#node(op: number, a: number, b = 0): Node {
		// 20 bits for each operand: a tape is far shorter.
		const key = (op * 0x100000 + a) * 0x100000 + b;
		const known = this.#known.get(key);
		if (known !== undefined) return known;
		const node = this.#add(op, a, b);
		this.#known.set(key, node);
		return node;
	}

	#add(op: number, a: number, b = 0, c = 0, value = 0): Node {
		const node = this.#ops.push(op) - 1;
		this.#a.push(a);
		this.#b.push(b);
		this.#c.push(c);
		this.#numbers.push(value);
		return node;
	}
}
