import { tolerance, type Interval } from './intervals';

/** Whether a first-order result holds, compared with trials (JCGM 101:2008, clause 8). */
export interface Validation {
	/** Numerical tolerance that the ends of the intervals are compared within. */
	tolerance: number;
	/** Distances of the lower and of the upper ends. */
	low: number;
	high: number;
	holds: boolean;
}

/** Compares value ± expanded uncertainty with the interval of trials; u counts to `digits` significant digits. */
export function validate(
	value: number,
	standardUncertainty: number,
	expandedUncertainty: number,
	trials: Interval,
	digits = 2,
): Validation {
	const delta = tolerance(standardUncertainty, digits);
	const low = Math.abs(value - expandedUncertainty - trials[0]);
	const high = Math.abs(value + expandedUncertainty - trials[1]);
	return { tolerance: delta, low, high, holds: low <= delta && high <= delta };
}
