import { exactProduct, exactSum } from '../curves/double-double';
import { refuseNotFinite, type Refusal } from './refusal';
import type { Slope } from './root';

/** Value and slope of c0 + c1 x + c2 x² + …, by Horner's scheme. */
export function polynomial(x: number, coefficients: readonly number[]): Slope {
	let value = 0;
	let derivative = 0;
	for (let k = coefficients.length - 1; k >= 0; k--) {
		derivative = derivative * x + value;
		value = value * x + coefficients[k]!;
	}
	return { value, derivative };
}

/**
 * The same with the value as good as if computed in twice the digits, for coefficients whose terms cancel: Horner's
 * scheme with its rounding errors carried along (Graillat, Langlois and Louvet, 2005).
 */
export function compensatedPolynomial(x: number, coefficients: readonly number[]): Slope {
	let value = 0;
	let error = 0;
	let derivative = 0;
	for (let k = coefficients.length - 1; k >= 0; k--) {
		derivative = derivative * x + value;
		const product = exactProduct(value, x);
		const sum = exactSum(product.hi, coefficients[k]!);
		value = sum.hi;
		error = error * x + (product.lo + sum.lo);
	}
	return { value: value + error, derivative };
}

/** Coefficients of the derivative. */
export function derivativeOf(coefficients: readonly number[]): number[] {
	return coefficients.slice(1).map((value, k) => value * (k + 1));
}

/** Refuses a polynomial with a member that is not finite. */
export function refusePolynomial(x: number, coefficients: readonly number[]): Refusal | undefined {
	const named = Object.fromEntries(coefficients.map((value, k) => [`c${k}`, value]));
	return refuseNotFinite({ x, ...named });
}
