import { polynomial } from '../tables/polynomial';
import { isRefusal, refuse, refuseNotFinite, type Refusal } from '../tables/refusal';
import { findCrossing } from '../tables/root';
import type { Fit } from './fit';
import { predict } from './predict';
import { scaled } from './scaling';
import { turningPoints } from './turning-points';

export interface Inversion {
	/** The x at which the curve has the wanted value. */
	value: number;
	/** dx/dy. */
	derivative: number;
	/** Of x, from the curve alone: a wanted value's own uncertainty counts with `derivative`. */
	standardUncertainty: number;
	/** As those of a prediction. */
	parts: number[];
}

/** x of a wanted y on the readings' range, where the curve only rises or only falls there. */
export function invert(fit: Fit, y: number): Inversion | Refusal {
	const fault = refuseNotFinite({ y }) ?? refuseNotMonotonic(fit);
	if (fault) return fault;
	const { centre, halfRange, coefficients } = fit.scaled;
	const at = (u: number) => polynomial(u, coefficients);
	const ends = [scaled(fit.scaled, fit.range.lower), scaled(fit.scaled, fit.range.upper)] as const;
	const [first, last] = [at(ends[0]).value, at(ends[1]).value];
	const [lower, upper] = [Math.min(first, last), Math.max(first, last)];
	// The value read off at an end may come back with its last digit rounded.
	const slack = 1e-14 * Math.max(Math.abs(lower), Math.abs(upper));
	if (y < lower - slack || y > upper + slack)
		return refuse('outOfRange', `The curve runs from ${short(lower)} to ${short(upper)} here`, {
			argument: 'y',
			mend: 'Take readings over a wider range, or ask for a value inside it.',
		});
	const wanted = Math.min(upper, Math.max(lower, y));
	const u =
		wanted === first ? ends[0] : wanted === last ? ends[1] : findCrossing(at, wanted, ...ends);
	const value = centre + u * halfRange;
	const there = predict(fit, value);
	if (isRefusal(there)) return there;
	if (there.derivative === 0)
		return refuse('notMonotonic', `The curve is level at ${short(value)}`, { argument: 'y' });
	const parts = there.parts.map((part) => -part / there.derivative);
	return {
		value,
		derivative: 1 / there.derivative,
		standardUncertainty: Math.hypot(...parts),
		parts,
	};
}

/** Refuses a curve that turns within the readings' range, and says where. */
export function refuseNotMonotonic(fit: Fit): Refusal | undefined {
	const turns = turningPoints(fit);
	const mend = 'Fit a narrower range, or a lower degree.';
	if (turns.length > 0) {
		const places = turns.map(short).join(', ');
		return refuse('notMonotonic', `The curve turns at x = ${places}, so it has no inverse`, {
			mend,
		});
	}
	if (fit.scaled.coefficients.slice(1).every((value) => value === 0))
		return refuse('notMonotonic', 'The curve is level, so it has no inverse');
	return undefined;
}

function short(value: number): string {
	return String(Number(value.toPrecision(6)));
}
