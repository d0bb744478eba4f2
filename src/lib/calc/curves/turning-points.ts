import { derivativeOf, polynomial } from '../tables/polynomial';
import { findCrossing } from '../tables/root';
import type { Fit } from './fit';
import { scaled } from './scaling';

/** Slopes below this share of the largest that the coefficients allow are rounding, not a turn. */
const level = 1e-13;

/** The x inside the readings' range where the curve changes between rising and falling, in rising order. */
export function turningPoints(fit: Fit): number[] {
	const { centre, halfRange, coefficients } = fit.scaled;
	const ends = [scaled(fit.scaled, fit.range.lower), scaled(fit.scaled, fit.range.upper)] as const;
	const slopes = derivativeOf(coefficients);
	const largest = slopes.reduce((sum, slope) => sum + Math.abs(slope), 0);
	return signChanges(slopes, ends, level * largest).map((u) => centre + u * halfRange);
}

/**
 * Where a polynomial changes its sign between two ends, values up to `least` counting as zero. Between neighbouring
 * changes of its slope's sign it is monotonic.
 */
function signChanges(
	coefficients: readonly number[],
	ends: readonly [number, number],
	least = 0,
): number[] {
	if (coefficients.length < 2) return [];
	const marks = [ends[0], ...signChanges(derivativeOf(coefficients), ends), ends[1]];
	const at = (u: number) => polynomial(u, coefficients);
	const clear = marks.filter((u) => Math.abs(at(u).value) > least);
	const found: number[] = [];
	for (const [i, low] of clear.slice(0, -1).entries()) {
		const high = clear[i + 1]!;
		if (at(low).value > 0 !== at(high).value > 0) found.push(findCrossing(at, 0, low, high));
	}
	return found;
}
