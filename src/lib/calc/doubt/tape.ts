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
	#known = new Map<string, Node>();
	#arguments = 0;
	#inputs = 0;

	constant(value: number): Node {
		return this.#node(`=${Object.is(value, -0) ? '-0' : value}`, Op.constant, 0, 0, 0, value);
	}

	/** The value of another line: argument `index` of this one. */
	argument(index: number): Node {
		this.#arguments = Math.max(this.#arguments, index + 1);
		return this.#node(`a${index}`, Op.argument, index);
	}

	/** The deviation of the line's own doubtful input `index`, to be added to its estimate. */
	input(index: number): Node {
		this.#inputs = Math.max(this.#inputs, index + 1);
		return this.#node(`i${index}`, Op.input, index);
	}

	unary(name: Unary, x: Node): Node {
		const op = Op[name];
		if (this.#isConstant(x)) return this.constant(unaryValue(op, this.#numbers[x]!));
		return this.#node(`${op} ${x}`, op, x);
	}

	/** A power with a whole constant exponent becomes `powi` by itself. */
	binary(name: Binary, x: Node, y: Node): Node {
		let op: number = Op[name];
		if (this.#isConstant(x) && this.#isConstant(y))
			return this.constant(binaryValue(op, this.#numbers[x]!, this.#numbers[y]!));
		if (op === Op.powi && !this.#isConstant(y)) op = Op.pow;
		if (op === Op.pow && this.#isConstant(y) && Number.isInteger(this.#numbers[y]!)) op = Op.powi;
		return this.#node(`${op} ${x} ${y}`, op, x, y);
	}

	/** `yes` where the condition is not zero, else `no`. */
	select(condition: Node, yes: Node, no: Node): Node {
		if (this.#isConstant(condition)) return this.#numbers[condition] !== 0 ? yes : no;
		if (yes === no) return yes;
		return this.#node(`${Op.select} ${condition} ${yes} ${no}`, Op.select, condition, yes, no);
	}

	call(external: External, operands: readonly Node[]): Node {
		if (operands.every((operand) => this.#isConstant(operand)))
			return this.constant(external.value(Float64Array.from(operands, (i) => this.#numbers[i]!)));
		this.#calls.push({ external, operands: Int32Array.from(operands) });
		return this.#node(undefined, Op.external, this.#calls.length - 1);
	}

	/** Keeps what `out` needs; the builder can go on being used for other tapes. */
	finish(out: Node): Tape {
		const used = new Uint8Array(out + 1);
		used[out] = 1;
		for (let i = out; i >= 0; i--) if (used[i]) for (const j of this.#operands(i)) used[j] = 1;
		const place = new Int32Array(out + 1);
		const kept: Node[] = [];
		for (let i = 0; i <= out; i++)
			if (used[i]) {
				place[i] = kept.length;
				kept.push(i);
			}
		const calls: Tape['calls'] = [];
		const first = (i: Node): number => {
			const op = this.#ops[i]!;
			if (op !== Op.external) return arity(op) > 0 ? place[this.#a[i]!]! : this.#a[i]!;
			const { external, operands } = this.#calls[this.#a[i]!]!;
			calls.push({ external, operands: operands.map((operand) => place[operand]!) });
			return calls.length - 1;
		};
		const ops = Uint8Array.from(kept, (i) => this.#ops[i]!);
		return {
			ops,
			a: Int32Array.from(kept, first),
			b: Int32Array.from(kept, (i) => (arity(this.#ops[i]!) > 1 ? place[this.#b[i]!]! : 0)),
			c: Int32Array.from(kept, (i) => (arity(this.#ops[i]!) > 2 ? place[this.#c[i]!]! : 0)),
			numbers: Float64Array.from(kept, (i) => this.#numbers[i]!),
			calls,
			arguments: this.#arguments,
			inputs: this.#inputs,
			linear: kept.every((i) => this.#isLinear(i)),
			special: ops.some(isSpecial),
		};
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

	#operands(i: Node): Iterable<number> {
		const op = this.#ops[i]!;
		if (op === Op.external) return this.#calls[this.#a[i]!]!.operands;
		return [this.#a[i]!, this.#b[i]!, this.#c[i]!].slice(0, arity(op));
	}

	#node(key: string | undefined, op: number, a: number, b = 0, c = 0, value = 0): Node {
		const known = key === undefined ? undefined : this.#known.get(key);
		if (known !== undefined) return known;
		const node = this.#ops.push(op) - 1;
		this.#a.push(a);
		this.#b.push(b);
		this.#c.push(c);
		this.#numbers.push(value);
		if (key !== undefined) this.#known.set(key, node);
		return node;
	}
}
