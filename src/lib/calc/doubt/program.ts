import { arity, binaryValue, Op, unaryValue } from './operations';
import { neededSteps, type Model } from './model';
import type { External } from './tape';

/** A number, the same in all trials, or the register that holds a block of it. */
export type Operand = { scalar: number } | { register: number };

export type Instruction =
	| { do: 'draw'; input: number; out: number }
	| { do: 'unary'; op: number; x: number; out: number }
	| { do: 'binary'; op: number; x: Operand; y: Operand; out: number }
	| { do: 'select'; condition: number; yes: Operand; no: Operand; out: number }
	| { do: 'call'; external: External; operands: Operand[]; out: number };

/** A model as one list of block operations: what does not vary is computed once, registers are used again. */
export interface Program {
	instructions: Instruction[];
	registers: number;
	outputs: Operand[];
	/** Numbers of the inputs that are drawn. */
	inputs: number[];
}

/** Compiles what `outputs`, places of lines, need of a model. */
export function compile(model: Model, outputs: readonly number[]): Program {
	const instructions: Instruction[] = [];
	const drawn = new Map<number, Operand>();
	const lines = new Map<number, Operand>();
	let registers = 0;
	const emit = (instruction: Instruction): Operand => {
		instructions.push(instruction);
		return { register: instruction.out };
	};
	const draw = (input: number): Operand => {
		const known = drawn.get(input) ?? emit({ do: 'draw', input, out: registers++ });
		drawn.set(input, known);
		return known;
	};
	for (const place of neededSteps(model, outputs)) {
		const { tape, args, inputs } = model.steps[place]!;
		const nodes: Operand[] = [];
		for (let i = 0; i < tape.ops.length; i++) {
			const op = tape.ops[i]!;
			const a = tape.a[i]!;
			if (op === Op.constant) nodes.push({ scalar: tape.numbers[i]! });
			else if (op === Op.argument) nodes.push(lines.get(args[a]!)!);
			else if (op === Op.input) nodes.push(draw(inputs[a]!));
			else if (op === Op.external) {
				const { external } = tape.calls[a]!;
				const operands = Array.from(tape.calls[a]!.operands, (operand) => nodes[operand]!);
				nodes.push(
					operands.every(isScalar)
						? { scalar: external.value(Float64Array.from(operands, ({ scalar }) => scalar)) }
						: emit({ do: 'call', external, operands, out: registers++ }),
				);
			} else {
				const [x, y, z] = [nodes[a]!, nodes[tape.b[i]!]!, nodes[tape.c[i]!]!];
				if (arity(op) === 1)
					nodes.push(
						isScalar(x)
							? { scalar: unaryValue(op, x.scalar) }
							: emit({ do: 'unary', op, x: x.register, out: registers++ }),
					);
				else if (arity(op) === 2)
					nodes.push(
						isScalar(x) && isScalar(y)
							? { scalar: binaryValue(op, x.scalar, y.scalar) }
							: emit({ do: 'binary', op, x, y, out: registers++ }),
					);
				else if (isScalar(x)) nodes.push(x.scalar !== 0 ? y : z);
				else
					nodes.push(
						emit({ do: 'select', condition: x.register, yes: y, no: z, out: registers++ }),
					);
			}
		}
		lines.set(place, nodes[nodes.length - 1]!);
	}
	const results = outputs.map((output) => lines.get(output)!);
	return reuseRegisters(instructions, results, [...drawn.keys()]);
}

export function isScalar(operand: Operand): operand is { scalar: number } {
	return 'scalar' in operand;
}

function operandsOf(instruction: Instruction): Operand[] {
	switch (instruction.do) {
		case 'draw':
			return [];
		case 'unary':
			return [{ register: instruction.x }];
		case 'binary':
			return [instruction.x, instruction.y];
		case 'select':
			return [{ register: instruction.condition }, instruction.yes, instruction.no];
		case 'call':
			return instruction.operands;
	}
}

/** Gives each result the register of one that is no longer needed, so that blocks stay in the processor's cache. */
function reuseRegisters(
	instructions: Instruction[],
	outputs: Operand[],
	inputs: number[],
): Program {
	const lastUse = new Map<number, number>();
	instructions.forEach((instruction, i) => {
		for (const operand of operandsOf(instruction))
			if (!isScalar(operand)) lastUse.set(operand.register, i);
	});
	for (const output of outputs) if (!isScalar(output)) lastUse.set(output.register, Infinity);
	const place = new Map<number, number>();
	const free: number[] = [];
	let registers = 0;
	const moved = (operand: Operand): Operand =>
		isScalar(operand) ? operand : { register: place.get(operand.register)! };
	const result = instructions.map((instruction, i): Instruction => {
		const used = operandsOf(instruction);
		const ended = new Set(
			used.flatMap((x) => (!isScalar(x) && lastUse.get(x.register) === i ? [x.register] : [])),
		);
		const operands = used.map(moved);
		// Element by element, so that a result may take the place of its own operand.
		for (const register of ended) free.push(place.get(register)!);
		const out = free.pop() ?? registers++;
		place.set(instruction.out, out);
		switch (instruction.do) {
			case 'draw':
				return { ...instruction, out };
			case 'unary':
				return { ...instruction, x: place.get(instruction.x)!, out };
			case 'binary':
				return { ...instruction, x: operands[0]!, y: operands[1]!, out };
			case 'select':
				return {
					...instruction,
					condition: place.get(instruction.condition)!,
					yes: operands[1]!,
					no: operands[2]!,
					out,
				};
			case 'call':
				return { ...instruction, operands, out };
		}
	});
	return { instructions: result, registers, outputs: outputs.map(moved), inputs };
}
