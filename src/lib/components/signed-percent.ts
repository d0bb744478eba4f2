import { formatNumber, minus } from '$lib/calc/units/number-text';

/** A share as a percentage with its sign: +4.5 %. */
export function signedPercent(share: number): string {
	const size = Math.abs(share) * 100;
	return `${share < 0 ? minus : '+'}${formatNumber(Number(size.toPrecision(size < 100 ? 2 : 3)))}\u00a0%`;
}
