import type { MonteCarlo, Quantity } from '$lib/calc/results';
import { density } from './density';

export const width = 560;
export const height = 150;

export interface Picture {
	/** Outline of the counts, an SVG path. */
	outline: string;
	/** First-order curve over it; '' where there is none. */
	curve: string;
	/** Ends of the two intervals, in the picture's x. */
	symmetric: [number, number];
	shortest: [number, number];
	mean: number;
}

const points = 120;

/** Trials as a picture: counts as areas, the distribution to first order in the same scale. */
export function pictureOf(
	{ histogram, symmetric, shortest, mean }: MonteCarlo,
	{ value, standardUncertainty: u, degreesOfFreedom: dof = null }: Quantity,
): Picture {
	const { from, to, counts } = histogram;
	const bin = (to - from) / counts.length;
	const total = counts.reduce((sum, n) => sum + n, 0);
	const expected = (x: number) =>
		value === null || !u ? 0 : (total * bin * density((x - value) / u, dof)) / u;
	const most = Math.max(...counts, value === null ? 0 : expected(value)) || 1;
	const x = (at: number) => round((width * (at - from)) / (to - from || 1));
	const y = (n: number) => round(height * (1 - (0.96 * n) / most));
	const steps = counts.map((n, i) => `L${x(from + i * bin)} ${y(n)}H${x(from + (i + 1) * bin)}`);
	const along = Array.from({ length: points + 1 }, (_, i) => from + ((to - from) * i) / points);
	return {
		outline: `M0 ${height}${steps.join('')}V${height}Z`,
		curve: u
			? along.map((at, i) => `${i === 0 ? 'M' : 'L'}${x(at)} ${y(expected(at))}`).join('')
			: '',
		symmetric: [x(symmetric[0]), x(symmetric[1])],
		shortest: [x(shortest[0]), x(shortest[1])],
		mean: x(mean),
	};
}

function round(pixels: number): number {
	return Math.round(pixels * 100) / 100;
}
