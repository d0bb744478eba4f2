import { at, copy, dot, put, subtractMultiple, type Column } from './columns';
import {
	minus,
	negative,
	one,
	over,
	plus,
	squareRoot,
	times,
	wide,
	zero,
	type Wide,
} from './double-double';

/** What a linear least-squares problem answers. Nothing here is rounded to double. */
export interface Solution {
	coefficients: Wide[];
	/** Inverse of the triangular factor: its rows times their transposes are the covariance for unit variance. */
	inverse: Wide[][];
	/** Share of each coefficient's direction in the observations: squares add to the explained sum of squares. */
	projections: Wide[];
	residuals: Column;
	residualSquares: Wide;
}

/** Smallest diagonal of the triangular factor, as a share of its column, that still counts as a direction of its own. */
const smallestShare = 1e-13;

/**
 * Least squares of `observed` on the design's columns by Householder reflections (Golub and Van Loan, Matrix
 * Computations, 5.3.2), in numbers of 32 digits. Rank is judged relative to each column's length, so that the columns
 * need no scaling of their own. Needs at least as many rows as columns. Answers the index of the first column that
 * depends on those before it, where there is one.
 */
export function solve(
	design: readonly Column[],
	observed: Column,
): Solution | { dependent: number } {
	const work = design.map(copy);
	const rotated = copy(observed);
	const diagonal: Wide[] = [];
	for (const [k, reflector] of work.entries()) {
		const length = squareRoot(dot(reflector, reflector, k));
		const whole = squareRoot(dot(design[k]!, design[k]!));
		if (!(length.hi > smallestShare * whole.hi)) return { dependent: k };
		const head = at(reflector, k);
		const pivot = head.hi > 0 ? negative(length) : length;
		put(reflector, k, minus(head, pivot));
		const half = times(length, plus(length, head.hi > 0 ? head : negative(head)));
		for (const target of [...work.slice(k + 1), rotated])
			subtractMultiple(target, over(dot(reflector, target, k), half), reflector, k);
		diagonal.push(pivot);
	}
	const triangle = (row: number, col: number) =>
		row === col ? diagonal[row]! : at(work[col]!, row);
	const inverse = inverted(triangle, design.length);
	const projections = design.map((_, k) => at(rotated, k));
	const coefficients = inverse.map((row) => sumOfProducts(row, projections));
	const residuals = copy(observed);
	for (const [k, values] of design.entries()) subtractMultiple(residuals, coefficients[k]!, values);
	return {
		coefficients,
		inverse,
		projections,
		residuals,
		residualSquares: dot(residuals, residuals),
	};
}

function inverted(triangle: (row: number, col: number) => Wide, size: number): Wide[][] {
	const inverse = Array.from({ length: size }, () => new Array<Wide>(size).fill(zero));
	for (let col = 0; col < size; col++)
		for (let row = col; row >= 0; row--) {
			let sum = row === col ? one : zero;
			for (let k = row + 1; k <= col; k++)
				sum = minus(sum, times(triangle(row, k), inverse[k]![col]!));
			inverse[row]![col] = over(sum, triangle(row, row));
		}
	return inverse;
}

/** Sum of the members' products, pair by pair. */
export function sumOfProducts(a: readonly Wide[], b: readonly Wide[]): Wide {
	return a.reduce((sum, value, k) => plus(sum, times(value, b[k] ?? zero)), wide(0));
}
