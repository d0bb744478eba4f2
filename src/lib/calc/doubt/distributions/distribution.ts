import type { Random } from '../random';

export type Kind =
	| 'normal'
	| 'rectangular'
	| 'triangular'
	| 'arcsine'
	| 'trapezoidal'
	| 'inexactRectangular'
	| 'student';

/** How an input deviates from its estimate. Plain data; numbers in the input's coherent unit. */
export interface Distribution {
	kind: Kind;
	/** Parameters of the kind, as its file describes them. */
	parameters: readonly number[];
	/** Standard uncertainty that first order counts with. */
	uncertainty: number;
	/** Degrees of freedom, `Infinity` where none are stated. */
	dof: number;
}

/** A parameter that makes no distribution: which one, by its place after the estimate, and why. */
export interface ParameterFault {
	fault: 'notFinite' | 'notPositive' | 'order' | 'tooFew' | 'noSpread';
	parameter: number;
	message: string;
}

/** What is needed of a kind beyond its standard uncertainty. */
export interface Shape {
	/** Half-width of the interval for the worst case; `sigmas` standard uncertainties where there are no ends. */
	halfWidth(parameters: readonly number[], sigmas: number): number;
	/** Draws `count` deviations. */
	fill(parameters: readonly number[], random: Random, into: Float64Array, count: number): void;
	/** Turns probabilities between 0 and 1 into deviations, in place; absent where `fill` is made from normal numbers. */
	place?(parameters: readonly number[], random: Random, into: Float64Array, count: number): void;
}

/** A shape that is drawn by turning uniform numbers into deviations. */
export function placed(halfWidth: Shape['halfWidth'], place: NonNullable<Shape['place']>): Shape {
	return {
		halfWidth,
		place,
		fill(parameters, random, into, count) {
			random.uniforms(into, count);
			place(parameters, random, into, count);
		},
	};
}

/** Faults of a parameter that must be finite and above zero. */
export function positiveFault(
	value: number,
	parameter: number,
	what: string,
): ParameterFault | undefined {
	if (!Number.isFinite(value))
		return { fault: 'notFinite', parameter, message: `${what} must be a finite number` };
	if (!(value > 0))
		return { fault: 'notPositive', parameter, message: `${what} must be greater than zero` };
	return undefined;
}
