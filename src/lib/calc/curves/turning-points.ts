import { derivativeOf, polynomial } from '../tables/polynomial';
import { findCrossing } from '../tables/root';
import type { Fit } from './fit';
import { scaled } from './scaling';

/** The x inside the readings' range where the curve changes between rising and falling, in rising order. */
export function turningPoints(fit: Fit): number[] {
	const { centre, halfRange, coefficients } = fit.scaled;
	const ends = [scaled(fit.scaled, fit.range.lower), scaled(fit.scaled, fit.range.upper)] as const;
	return signChanges(derivativeOf(coefficients), ends).map((u) => centre + u * halfRange);
}

/** Where a polynomial changes its sign between two ends: between neighbouring changes of its slope's sign it is monotonic. */
function signChanges(coefficients: readonly number[], ends: readonly [number, number]): number[] {
	if (coefficients.length < 2) return [];
	const marks = [ends[0], ...signChanges(derivativeOf(coefficients), ends), ends[1]];
	const at = (u: number) => polynomial(u, coefficients);
	const found: number[] = [];
	for (const [i, low] of marks.slice(0, -1).entries()) {
		const high = marks[i + 1]!;
		if (at(low).value * at(high).value < 0) found.push(findCrossing(at, 0, low, high));
	}
	return found;
}
