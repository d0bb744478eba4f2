import type { Requirement } from '$lib/calc/results';

/** Where a requirement's marks stand on its gauge, as shares of the width, 0 left and 1 right. */
export interface GaugeScale {
	value: number;
	lower: number | null;
	upper: number | null;
	/** The value lies outside the drawn range and stands at its edge. */
	beyond: 'left' | 'right' | null;
}

/** Share of the width that the distance from value to limit takes at least. */
const leastShare = 0.16;
/** Share of the width left free beyond a limit. */
const rest = 0.24;

/** A linear scale on which limits and value can be told apart: it starts from zero where that shows enough. */
export function gaugeScale({
	value,
	lower,
	upper,
}: Pick<Requirement, 'value' | 'lower' | 'upper'>): GaugeScale {
	const [left, right] = drawnRange(value, lower, upper);
	const share = (x: number) => (x - left) / (right - left);
	const at = share(value);
	return {
		value: Math.min(0.97, Math.max(0.03, at)),
		lower: lower === null ? null : share(lower),
		upper: upper === null ? null : share(upper),
		beyond: at < 0.03 ? 'left' : at > 0.97 ? 'right' : null,
	};
}

function drawnRange(value: number, lower: number | null, upper: number | null): [number, number] {
	if (lower !== null && upper !== null) {
		const span = upper - lower || Math.abs(upper) || 1;
		return [lower - 0.3 * span, upper + 0.3 * span];
	}
	const limit = upper ?? lower ?? 0;
	const distance = Math.abs(value - limit);
	const whole = Math.max(Math.abs(limit), distance) || 1;
	const width = distance > 0 ? Math.min(whole / (1 - rest), distance / leastShare) : whole;
	return upper !== null
		? [limit - (1 - rest) * width, limit + rest * width]
		: [limit - rest * width, limit + (1 - rest) * width];
}
