import type { Distribution, ParameterFault } from '../doubt/distributions/distribution';
import type { Unary } from '../doubt/operations';
import type { TapeBuilder } from '../doubt/tape';
import type { Place } from '../language/nodes';
import { mapNodes, type Traced } from '../traced';
import { Trouble } from '../trouble';
import { differ, isNumeric, isPure, pure, spoken, type Type } from '../types';
import type { Unit } from '../units/unit';
import { isGrid, map, type Value } from '../values';

/** A value of a call, as far as it is known before computing. */
export interface Argument extends Place {
	type: Type;
	/** Set where a unit itself is given: `number(x, mV)`. */
	unit?: Unit;
}

/** A function of the language with its place in the handbook. */
export interface CalcFunction {
	readonly name: string;
	readonly signature: string;
	readonly help: string;
	/** Each is a formula and the text of its readout, with ordinary spaces. */
	readonly examples: readonly { source: string; result: string }[];
	/** Where the method is published. */
	readonly source?: string;
	/** Number of values, at least and at most. */
	readonly count: readonly [number, number];
	/** Position of a value that is a unit. */
	readonly unitAt?: number;
	/** Type of the result. Throws Trouble on wrong units. */
	readonly type: (args: Argument[]) => Type;
	/** Computes in SI units. Throws Refusal. A unit is passed as its size. */
	readonly compute: (args: Value[]) => Value;
	/** Operations of a call beyond one for each number that it is given. */
	readonly cost?: (args: Value[]) => number;
	/**
	 * Derivative of `compute` by each of its values where all numbers are single ones, 0 at the place of a value that is no
	 * number. A function with neither `slopes` nor `trace` has its sensitivities taken from differences.
	 */
	readonly slopes?: (args: Value[]) => number[];
	/** Puts a call of doubtful values on a tape, operation by operation. Throws Refusal. */
	readonly trace?: (tape: TapeBuilder, args: Traced[]) => Traced;
	/** Takes the estimates of its values and gives an exact result: a chosen part, a text. */
	readonly ofEstimate?: boolean;
	/** States an input: its result deviates from `compute`, or from the traced first value, as this says. */
	readonly states?: Statement;
	/** Changes the input that its first value, a call of a function that states one, has stated. */
	readonly restates?: (stated: Distribution, args: Value[]) => Distribution | ParameterFault;
	/** Asks for the doubt of its value instead of computing with it. */
	readonly reads?: 'uncertainty' | 'lower' | 'upper';
}

/** How a function states an input. */
export interface Statement {
	/** Whether the first value is the centre, and may itself be in doubt. */
	readonly centred: boolean;
	/** Positions of half-widths and uncertainties, in the unit of the centre or relative to it. */
	readonly widths: readonly number[];
	/** Numbers in SI units, widths absolute. */
	readonly distribution: (args: Value[]) => Distribution | ParameterFault;
}

/** A value that a function cannot take, found while computing. */
export class Refusal extends Error {
	constructor(
		message: string,
		readonly mend?: string,
	) {
		super(message);
		this.name = 'Refusal';
	}
}

/** Throws unless the value is a number of no unit. */
export function expectPure(argument: Argument, what: string): void {
	if (argument.type.kind !== 'unknown' && argument.type.kind !== 'number')
		throw new Trouble(
			'dimension',
			argument,
			`${what} is a pure number, not ${spoken(argument.type)}.`,
		);
	if (argument.type.dimension === undefined || isPure(argument.type)) return;
	const name = spoken(argument.type);
	throw new Trouble('dimension', argument, `${what} is a pure number, not ${name}.`, {
		mend: argument.type.point
			? 'Subtract the zero of the scale and divide by a unit.'
			: `Divide by a unit, \`(1 ${argument.type.unit?.text ?? name})\` say.`,
	});
}

/** Throws unless all are numbers of one unit; returns the type they share. */
export function expectSame(args: Argument[], doing: string): Type {
	const first = args.find((argument) => argument.type.dimension !== undefined) ?? args[0];
	if (!first) return pure;
	for (const argument of args) {
		expectNumber(argument, doing);
		if (differ(first.type, argument.type))
			throw new Trouble(
				'dimension',
				argument,
				`${doing} ${spoken(first.type)} and ${spoken(argument.type)} together.`,
			);
	}
	const alike = args.every((argument) => argument.type.unit?.text === first.type.unit?.text);
	if (alike) return first.type;
	const { dimension, point } = first.type;
	return {
		kind: 'number',
		...(dimension && { dimension }),
		...(point && { point, unit: first.type.unit }),
	};
}

/** Throws where a condition, a series or a text is given for a number, or a temperature on a scale where `point` forbids it. */
export function expectNumber(argument: Argument, doing: string): void {
	if (!isNumeric(argument.type))
		throw new Trouble('dimension', argument, `${doing} numbers, not ${spoken(argument.type)}.`);
}

/** Throws where a temperature on a scale is given for something that is multiplied. */
export function refusePoint(argument: Argument, doing: string): void {
	if (!argument.type.point) return;
	throw new Trouble(
		'dimension',
		argument,
		`${doing} ${spoken(argument.type)}, which has a zero of its own.`,
		{
			mend: 'Take a difference, `(T - 0 degC)` say, or the absolute temperature, `(T to K)`.',
		},
	);
}

/** A function of one pure number, applied to each member of a list. */
export function ofNumber(
	about: Pick<CalcFunction, 'name' | 'signature' | 'help' | 'examples'>,
	fn: (x: number) => number,
	domain?: { holds: (x: number) => boolean; message: string },
	/** Its derivative; without it the tape has an operation of this name. */
	slope?: (x: number) => number,
): CalcFunction {
	return {
		...about,
		count: [1, 1],
		type: ([x]) => {
			if (x) expectPure(x, `The value of \`${about.name}\``);
			return pure;
		},
		compute: ([x = 0]) =>
			map(x, (number) => {
				if (domain && !domain.holds(number)) throw new Refusal(domain.message);
				return fn(number);
			}),
		...(slope
			? { slopes: ([x]: Value[]) => [slope(Number(x))] }
			: {
					trace: (tape: TapeBuilder, [x]: Traced[]) =>
						mapNodes(tape, x!, (node) => tape.unary(about.name as Unary, node)),
				}),
	};
}

/** The one number of a value. Throws Refusal for a list. */
export function scalar(value: Value | undefined, what: string): number {
	if (value === undefined || isGrid(value)) throw new Refusal(`${what} is one number, not a list.`);
	return Number(value);
}
