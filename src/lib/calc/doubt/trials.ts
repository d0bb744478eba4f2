import type { Correlations, Group } from './correlations';
import { shapes } from './distributions/shapes';
import { binaryBlock, scalarBlock, unaryBlock } from './kernels';
import { streamOf, type Model } from './model';
import { isScalar, type Instruction, type Operand, type Program } from './program';
import { Random } from './random';
import { normalProbability } from './student';

/**
 * Trials that are drawn together. Every input has a stream of its own for each stretch, so that a result depends on
 * the seed alone: not on how many stretches a worker takes at once, nor on which other quantities are asked.
 */
export const stretchLength = 1_000;

/** Draws trials of a program, a stretch at a time, in blocks that stay small. */
export class Trials {
	readonly #random = new Random();
	readonly #registers: Float64Array[];
	readonly #correlated: CorrelatedDraws | undefined;

	constructor(
		readonly model: Model,
		readonly program: Program,
		readonly seed: number,
	) {
		this.#registers = Array.from(
			{ length: program.registers },
			() => new Float64Array(stretchLength),
		);
		if (model.correlations && model.correlations.groups.length > 0)
			this.#correlated = new CorrelatedDraws(model, model.correlations, program.inputs);
	}

	/** Writes `count` trials of stretch number `stretch` to each of `into`, one array for each output, from `at` on. */
	draw(stretch: number, count: number, into: readonly Float64Array[], at: number): void {
		this.#correlated?.draw(this.#random, this.seed, stretch, count);
		for (const instruction of this.program.instructions) this.#run(instruction, stretch, count);
		this.program.outputs.forEach((output, k) => {
			if (isScalar(output)) into[k]!.fill(output.scalar, at, at + count);
			else into[k]!.set(this.#registers[output.register]!.subarray(0, count), at);
		});
	}

	#run(instruction: Instruction, stretch: number, count: number): void {
		const out = this.#registers[instruction.out]!;
		switch (instruction.do) {
			case 'draw': {
				const { input } = instruction;
				if (this.#correlated?.take(input, out)) return;
				const { kind, parameters } = this.model.inputs[input]!;
				this.#random.start(this.seed, streamOf(this.model, input), stretch);
				shapes[kind].fill(parameters, this.#random, out, count);
				return;
			}
			case 'unary':
				unaryBlock(instruction.op, this.#registers[instruction.x]!, out, count);
				return;
			case 'binary': {
				const { op, x, y } = instruction;
				if (isScalar(x)) {
					if (!isScalar(y))
						scalarBlock(op, this.#registers[y.register]!, x.scalar, true, out, count);
				} else if (isScalar(y))
					scalarBlock(op, this.#registers[x.register]!, y.scalar, false, out, count);
				else
					binaryBlock(op, this.#registers[x.register]!, this.#registers[y.register]!, out, count);
				return;
			}
			case 'select': {
				const condition = this.#registers[instruction.condition]!;
				const yes = this.#at(instruction.yes);
				const no = this.#at(instruction.no);
				for (let i = 0; i < count; i++) out[i] = condition[i] !== 0 ? yes(i) : no(i);
				return;
			}
			case 'call': {
				const { external } = instruction;
				const operands = instruction.operands.map((operand) => this.#at(operand));
				const values = new Float64Array(operands.length);
				for (let i = 0; i < count; i++) {
					for (let k = 0; k < operands.length; k++) values[k] = operands[k]!(i);
					out[i] = external.value(values);
				}
			}
		}
	}

	#at(operand: Operand): (trial: number) => number {
		if (isScalar(operand)) return () => operand.scalar;
		const register = this.#registers[operand.register]!;
		return (trial) => register[trial]!;
	}
}

/**
 * Inputs that are correlated, drawn together (JCGM 101:2008, 6.4.8): normal numbers with the given correlation matrix,
 * turned into each input's own distribution. Normal inputs have exactly the stated coefficient, t distributions with
 * equal degrees of freedom too, as they share the divisor of a multivariate t. A pair with another distribution in it
 * keeps each distribution and the rank order; its linear coefficient comes out a few hundredths of itself smaller.
 */
class CorrelatedDraws {
	readonly #groups: Group[] = [];
	readonly #blocks = new Map<number, Float64Array>();
	readonly #normals: Float64Array[] = [];

	constructor(
		readonly model: Model,
		correlations: Correlations,
		inputs: readonly number[],
	) {
		for (const group of correlations.groups) {
			if (!inputs.some((input) => correlations.groupOf.get(input) === group)) continue;
			this.#groups.push(group);
			for (const member of group.members) this.#blocks.set(member, new Float64Array(stretchLength));
			while (this.#normals.length < group.members.length)
				this.#normals.push(new Float64Array(stretchLength));
		}
	}

	draw(random: Random, seed: number, stretch: number, count: number): void {
		for (const { members, factor } of this.#groups) {
			const n = members.length;
			for (let k = 0; k < n; k++) {
				random.start(seed, streamOf(this.model, members[k]!), stretch);
				random.normals(this.#normals[k]!, count);
			}
			const divisors = new Map<number, Float64Array>();
			for (let k = 0; k < n; k++) {
				const block = this.#blocks.get(members[k]!)!.fill(0);
				for (let j = 0; j <= k; j++) {
					const weight = factor[k * n + j]!;
					const z = this.#normals[j]!;
					if (weight !== 0) for (let i = 0; i < count; i++) block[i]! += weight * z[i]!;
				}
				this.#shape(members[k]!, block, count, random, seed, stretch, divisors);
			}
		}
	}

	/** Copies an input's block, if it is a correlated one. */
	take(input: number, into: Float64Array): boolean {
		const block = this.#blocks.get(input);
		if (block) into.set(block);
		return block !== undefined;
	}

	#shape(
		input: number,
		block: Float64Array,
		count: number,
		random: Random,
		seed: number,
		stretch: number,
		divisors: Map<number, Float64Array>,
	): void {
		const { kind, parameters } = this.model.inputs[input]!;
		const shape = shapes[kind];
		// A stream beside the one that the normal numbers of this input came from.
		random.start(seed, ~streamOf(this.model, input), stretch);
		if (shape.place) {
			for (let i = 0; i < count; i++) block[i] = normalProbability(block[i]!);
			shape.place(parameters, random, block, count);
			return;
		}
		const [u = 0, dof = Infinity] = parameters;
		const divisor = dof === Infinity ? undefined : (divisors.get(dof) ?? chi(random, dof, count));
		if (divisor) divisors.set(dof, divisor);
		for (let i = 0; i < count; i++) block[i]! *= divisor ? u / divisor[i]! : u;
	}
}

/** Square roots of chi-squared over its degrees of freedom. */
function chi(random: Random, dof: number, count: number): Float64Array {
	const result = new Float64Array(count);
	for (let i = 0; i < count; i++) result[i] = Math.sqrt((2 * gamma(random, dof / 2)) / dof);
	return result;
}

/** A gamma number of this shape (G. Marsaglia, W. W. Tsang, ACM Transactions on Mathematical Software 26, 2000). */
function gamma(random: Random, shape: number): number {
	if (shape < 1) return gamma(random, shape + 1) * Math.pow(random.uniform(), 1 / shape);
	const d = shape - 1 / 3;
	const c = 1 / Math.sqrt(9 * d);
	for (;;) {
		const z = random.normal();
		const v = (1 + c * z) ** 3;
		if (v > 0 && Math.log(random.uniform()) < 0.5 * z * z + d - d * v + d * Math.log(v))
			return d * v;
	}
}
