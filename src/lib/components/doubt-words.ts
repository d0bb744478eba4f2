import { formatNumber } from '$lib/calc/units/number-text';

const distributions: Readonly<Record<string, string>> = {
	normal: 'normal',
	rectangular: 'rectangular',
	triangular: 'triangular',
	arcsine: 'U-shaped',
	trapezoidal: 'trapezoidal',
	inexactRectangular: 'rectangular, its limits in doubt',
	student: 't',
};

/** How an input is distributed, in words. */
export function distribution(kind: string): string {
	return distributions[kind] ?? kind;
}

/** Degrees of freedom as they are written; infinite ones are null. */
export function degreesOfFreedom(dof: number | null): string {
	return dof === null ? '∞' : formatNumber(dof, 3);
}

/** A coverage factor with two decimals. */
export function factor(k: number): string {
	return k.toFixed(2);
}

/** A share as a percentage; small ones keep a digit that says something. */
export function percent(share: number): string {
	const size = Math.abs(share * 100);
	if (size === 0) return '0\u00a0%';
	if (size < 0.05) return share < 0 ? '> \u22120.1\u00a0%' : '< 0.1\u00a0%';
	const shown = size < 9.95 ? Number(size.toFixed(1)) : Math.round(size);
	return `${share < 0 ? '\u2212' : ''}${shown}\u00a0%`;
}

/** A count with its digits in groups. */
export function count(n: number): string {
	return formatNumber(n);
}
