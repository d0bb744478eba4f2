import type { Unit } from '../units/unit';

export interface Place {
	/** Columns in the line, `to` exclusive. */
	readonly from: number;
	readonly to: number;
}

export type Comparison = '<' | '<=' | '>' | '>=' | '==' | '!=';
export type BinaryOperator =
	'+' | '-' | '*' | '/' | '^' | '.*' | './' | '.^' | 'mod' | 'and' | 'or' | 'xor';

/** An expression behind the allow-list. `value` of a number is in SI units; `unit` is the one it was typed in. */
export type Node = Place &
	(
		| { kind: 'number'; value: number; typed: number; unit: Unit | undefined }
		/** A unit that multiplies something, or stands where only a unit may. */
		| { kind: 'unit'; unit: Unit }
		| { kind: 'name'; name: string; typed: string }
		| { kind: 'series'; name: string }
		| { kind: 'boolean'; value: boolean }
		/** Characters in quotes. */
		| { kind: 'text'; value: string }
		| { kind: 'unary'; op: '-' | '+' | 'not' | '!'; value: Node }
		| { kind: 'binary'; op: BinaryOperator; left: Node; right: Node }
		| { kind: 'compare'; ops: Comparison[]; operands: Node[] }
		| { kind: 'choice'; condition: Node; yes: Node; no: Node }
		| { kind: 'call'; name: string; typed: string; nameTo: number; args: Node[] }
		| { kind: 'array'; rows: Node[][]; flat: boolean }
		| { kind: 'range'; start: Node; step: Node | undefined; end: Node }
		| { kind: 'index'; object: Node; indexes: Node[] }
		/** `x to mV`; for a number times a temperature scale `scaled` is true and the value counts in that unit. */
		| { kind: 'convert'; value: Node; unit: Unit; scaled: boolean }
	);

export type NodeOf<K extends Node['kind']> = Extract<Node, { kind: K }>;

/** A name that an expression uses, at the place where it first does. */
export interface Reference extends Place {
	name: string;
	typed: string;
	/** Whether it is called: `f(2)`. */
	called: boolean;
}

/** A number and the unit symbol directly behind it. */
export interface UnitBehindNumber extends Place {
	typed: string;
	number: string;
}

/** The parts of an expression that are expressions themselves. */
export function partsOf(node: Node): readonly Node[] {
	switch (node.kind) {
		case 'unary':
		case 'convert':
			return [node.value];
		case 'binary':
			return [node.left, node.right];
		case 'compare':
			return node.operands;
		case 'choice':
			return [node.condition, node.yes, node.no];
		case 'call':
			return node.args;
		case 'array':
			return node.rows.flat();
		case 'range':
			return node.step ? [node.start, node.step, node.end] : [node.start, node.end];
		case 'index':
			return [node.object, ...node.indexes];
		default:
			return [];
	}
}

/** Levels of an expression's tree. */
export function heightOf(node: Node): number {
	let height = 0;
	let level: readonly Node[] = [node];
	while (level.length > 0) {
		height += 1;
		level = level.flatMap(partsOf);
	}
	return height;
}

const arithmetic = new Set<Node['kind']>(['number', 'unit', 'name', 'unary', 'binary', 'convert']);

/** Whether an expression is nothing but numbers, names and operators: what it costs is bounded by its length. */
export function isArithmetic(node: Node): boolean {
	return arithmetic.has(node.kind) && partsOf(node).every(isArithmetic);
}

/** Whether an expression uses a name. */
export function hasNames(node: Node): boolean {
	return node.kind === 'name' || partsOf(node).some(hasNames);
}
