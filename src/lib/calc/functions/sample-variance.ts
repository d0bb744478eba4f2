import { Refusal } from './function';

/** Variance of a sample about its mean, divisor n − 1. Throws Refusal for fewer than two values. */
export function sampleVariance(values: Float64Array): number {
	const count = values.length;
	if (count < 2) throw new Refusal('A spread needs two values or more.');
	const mean = values.reduce((sum, x) => sum + x / count, 0);
	return values.reduce((sum, x) => sum + (x - mean) ** 2, 0) / (count - 1);
}
