import type { Column } from '$lib/calc/results';

/** Columns of data sets that are made by rule rather than listed, by the case's id. */
export const madeColumns: Readonly<Record<string, () => Column[]>> = {
	// The data set's digit 957 is 3, where pi has 8.
	'strd-uni-pidigits': () => [y(piDigits(5000).map((digit, i) => (i === 956 ? 3 : digit)))],
	'strd-uni-numacc2': () => [y(alternating(1.2, 1.1, 1.3))],
	'strd-uni-numacc3': () => [y(alternating(1_000_000.2, 1_000_000.1, 1_000_000.3))],
	'strd-uni-numacc4': () => [y(alternating(10_000_000.2, 10_000_000.1, 10_000_000.3))],
};

function y(values: number[]): Column {
	return { name: 'y', unit: '1', values };
}

/** Digits of pi by Machin's formula, in whole numbers. */
function piDigits(count: number): number[] {
	const one = 10n ** BigInt(count + 10);
	const arccot = (x: bigint) => {
		let term = one / x;
		let sum = term;
		for (let k = 3n, sign = -1n; term !== 0n; k += 2n, sign = -sign) {
			term /= x * x;
			sum += (sign * term) / k;
		}
		return sum;
	};
	const pi = 4n * (4n * arccot(5n) - arccot(239n));
	return [...String(pi)].slice(0, count).map(Number);
}

/** First value, then two others 500 times, as the numerical-accuracy sets are made. */
function alternating(first: number, low: number, high: number): number[] {
	return [first, ...Array.from({ length: 1000 }, (_, i) => (i % 2 === 0 ? low : high))];
}
