import { formatNumber } from '$lib/calc/units/number-text';

/** A mark of an axis with its figure. */
export interface Tick {
	value: number;
	text: string;
}

/** Round numbers of a range, about `count` of them, in steps of 1, 2 or 5 of a decade. */
export function linearTicks(from: number, to: number, count: number): Tick[] {
	const span = to - from;
	if (!(span > 0) || !Number.isFinite(span)) return [{ value: from, text: formatNumber(from, 4) }];
	const raw = span / Math.max(1, count);
	const decade = 10 ** Math.floor(Math.log10(raw));
	const share = raw / decade;
	const step = decade * (share < 1.42 ? 1 : share < 3.2 ? 2 : share < 7.1 ? 5 : 10);
	const first = Math.ceil(from / step - 1e-9);
	const last = Math.floor(to / step + 1e-9);
	return Array.from({ length: last - first + 1 }, (_, i) => {
		// The product alone would be 0.30000000000000004.
		const value = Number(((first + i) * step).toPrecision(12));
		return { value, text: formatNumber(value) };
	});
}

/** Decades of a range above zero; with few of them their doubles and fivefolds, within one round numbers. */
export function logarithmicTicks(from: number, to: number, count: number): Tick[] {
	const decades = Math.log10(to / from);
	if (decades < 1) return linearTicks(from, to, count);
	const factors = decades <= count / 3 ? [1, 2, 5] : [1];
	const every = Math.ceil(decades / count);
	const first = Math.floor(Math.log10(from) + 1e-9);
	const ticks: Tick[] = [];
	for (let power = first; power <= Math.log10(to) + 1e-9; power += every)
		for (const factor of factors) {
			const value = Number((factor * 10 ** power).toPrecision(12));
			if (value >= from * (1 - 1e-9) && value <= to * (1 + 1e-9))
				ticks.push({ value, text: formatNumber(value) });
		}
	return ticks;
}
