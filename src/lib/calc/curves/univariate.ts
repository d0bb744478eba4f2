import { refuse, type Refusal } from '../tables/refusal';
import { column, dot, fromNumbers, put, type Column } from './columns';
import { minus, narrow, over, plus, squareRoot, wide, zero, type Wide } from './double-double';
import { refuseMember } from './readings';
import { powerOfTwo } from './scaling';

// Everything here adds in 32 digits and rounds once, at the end.

/** Sum of a column; 0 for an empty one. */
export function sum(values: readonly number[]): number | Refusal {
	const fault = refuseMember('values', values);
	if (fault) return fault;
	const unit = powerOfTwo(values);
	const all = narrow(total(values.map((value) => value / unit))) * unit;
	return Number.isFinite(all)
		? all
		: refuse('overflow', 'The sum is too large', { argument: 'values' });
}

export function mean(values: readonly number[]): number | Refusal {
	const fault = refuseColumn(values, 1);
	if (fault) return fault;
	const unit = powerOfTwo(values);
	return narrow(wideMean(values.map((value) => value / unit))) * unit;
}

/** Standard deviation of the readings, with n − 1. */
export function standardDeviation(values: readonly number[]): number | Refusal {
	const fault = refuseColumn(values, 2);
	if (fault) return fault;
	const { square, unit } = spreadOf(values);
	return narrow(squareRoot(square)) * unit;
}

/** Variance of the readings, with n − 1. */
export function variance(values: readonly number[]): number | Refusal {
	const fault = refuseColumn(values, 2);
	if (fault) return fault;
	const { square, unit } = spreadOf(values);
	return narrow(square) * unit * unit;
}

function refuseColumn(values: readonly number[], needed: number): Refusal | undefined {
	if (values.length >= needed) return refuseMember('values', values);
	const count = needed === 1 ? 'a reading' : `${needed} readings`;
	return refuse('tooFew', `This needs at least ${count}; there are ${values.length}`, {
		argument: 'values',
	});
}

function total(values: readonly number[]): Wide {
	let sum = zero;
	for (const value of values) sum = plus(sum, wide(value));
	return sum;
}

function wideMean(values: readonly number[]): Wide {
	return over(total(values), wide(values.length));
}

/** Variance in squares of a power of two. */
function spreadOf(values: readonly number[]): { square: Wide; unit: number } {
	const { deviations, unit } = deviationsOf(values);
	return { square: over(dot(deviations, deviations), wide(values.length - 1)), unit };
}

/** Deviations from the mean, divided by a power of two so that their squares stay in range. */
function deviationsOf(values: readonly number[]): { deviations: Column; unit: number } {
	const unit = powerOfTwo(values);
	const inUnit = fromNumbers(values.map((value) => value / unit));
	const middle = wideMean(Array.from(inUnit.hi));
	const deviations = column(values.length);
	for (const [i, value] of inUnit.hi.entries()) put(deviations, i, minus(wide(value), middle));
	return { deviations, unit };
}
