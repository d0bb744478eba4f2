/** A relative deviation with its sign; what is nothing but rounding is 0. */
export function signedPercent(share: number): string {
	const percent = Number((share * 100).toPrecision(2));
	if (Math.abs(share) < 1e-9) return '0\u00a0%';
	return `${percent < 0 ? '\u2212' : '+'}${Math.abs(percent).toFixed(Math.abs(percent) < 0.1 ? 3 : 2)}\u00a0%`;
}
