import type { Requirement } from '$lib/calc/results';

/** Where a requirement's marks stand on its gauge, as shares of the width, 0 left and 1 right. */
export interface GaugeScale {
	value: number;
	lower: number | null;
	upper: number | null;
	/** Ends of the value's expanded uncertainty, inside the picture; null while it is exact. */
	doubt: [number, number] | null;
	/** Where the guard band of each limit ends; null without one. */
	guard: { lower: number | null; upper: number | null };
	/** The value lies outside the drawn range and stands at its edge. */
	beyond: 'left' | 'right' | null;
}

/** Share of the width that the distance from value to limit takes at least. */
const leastShare = 0.16;
/** Share of the width left free beyond a limit. */
const rest = 0.24;

type Drawn = Pick<Requirement, 'value' | 'lower' | 'upper' | 'expandedUncertainty' | 'guardBand'>;

/**
 * A linear scale on which limits, doubt and value can be told apart: it starts from zero where that shows enough. With
 * another state of the requirement `beside` it, both fit on it.
 */
export function gaugeScale(requirement: Drawn, beside?: Drawn): GaugeScale {
	const { value, lower, upper, expandedUncertainty: doubt = 0, guardBand } = requirement;
	const ranges = [requirement, ...(beside ? [beside] : [])].map(drawnRange);
	const left = Math.min(...ranges.map(([from]) => from));
	const right = Math.max(...ranges.map(([, to]) => to));
	const share = (x: number) => (x - left) / (right - left);
	const inside = (x: number) => Math.min(1, Math.max(0, share(x)));
	const at = share(value);
	const guard = (limit: number | null, width: number | null | undefined, sign: 1 | -1) =>
		limit === null || !width ? null : inside(limit + sign * width);
	return {
		value: Math.min(0.97, Math.max(0.03, at)),
		lower: lower === null ? null : share(lower),
		upper: upper === null ? null : share(upper),
		doubt: doubt > 0 ? [inside(value - doubt), inside(value + doubt)] : null,
		guard: {
			lower: guard(lower, guardBand?.lower, 1),
			upper: guard(upper, guardBand?.upper, -1),
		},
		beyond: at < 0.03 ? 'left' : at > 0.97 ? 'right' : null,
	};
}

function drawnRange({
	value,
	lower,
	upper,
	expandedUncertainty: doubt = 0,
	guardBand,
}: Drawn): [number, number] {
	if (lower !== null && upper !== null) {
		const span = upper - lower || Math.abs(upper) || 1;
		return [lower - 0.3 * span, upper + 0.3 * span];
	}
	const limit = upper ?? lower ?? 0;
	const distance = Math.abs(value - limit);
	const guarded = guardBand?.upper ?? guardBand?.lower ?? 0;
	// What is smaller than the doubt need not be told apart.
	const apart = drawable(Math.max(distance, 1.5 * doubt, 1.5 * guarded));
	const whole = drawable(Math.max(Math.abs(limit), apart)) || 1;
	const width = apart > 0 ? Math.min(whole / (1 - rest), apart / leastShare) : whole;
	// All of the doubt is drawn, and the value not at the very edge.
	const around = 1.2 * doubt;
	return upper !== null
		? [
				Math.min(limit - (1 - rest) * width, around > 0 ? value - around : Infinity),
				limit + rest * width,
			]
		: [
				limit - rest * width,
				Math.max(limit + (1 - rest) * width, around > 0 ? value + around : -Infinity),
			];
}

/** A length that a share of can still be computed; 0 for one near the least number that there is. */
function drawable(length: number): number {
	return length < 1e-290 ? 0 : length;
}
