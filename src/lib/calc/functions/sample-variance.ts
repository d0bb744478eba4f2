import * as readings from '../curves/univariate';
import { answered } from './answered';
import { Refusal } from './function';

/** Variance of a sample about its mean, divisor n − 1. Throws Refusal for fewer than two values. */
export function sampleVariance(values: Float64Array): number {
	if (values.length < 2) throw new Refusal('A spread needs two values or more.');
	return answered(readings.variance(Array.from(values)));
}

/** Standard deviation of a sample about its mean, divisor n − 1. Throws Refusal for fewer than two values. */
export function sampleDeviation(values: Float64Array): number {
	if (values.length < 2) throw new Refusal('A spread needs two values or more.');
	return answered(readings.standardDeviation(Array.from(values)));
}
