/** Cells of a note of 60 worked lines; every line after the first depends on the one before, so that a change of the first reaches the last. */
export const sixtyLines = [
	{ kind: 'text' as const, source: '## Sixty lines\n\nThe last tap reads {{tap_60}}.' },
	{ kind: 'calculation' as const, source: lines(1, 20) },
	{ kind: 'calculation' as const, source: lines(21, 40) },
	{ kind: 'calculation' as const, source: lines(41, 60) },
];

/** The last quantity. */
export const lastName = 'tap_60';

function lines(first: number, last: number): string {
	const numbers = Array.from({ length: last - first + 1 }, (_, index) => first + index);
	return numbers.map(line).join('\n');
}

function line(number: number): string {
	if (number === 1) return 'tap_1 = 5 V';
	const before = `tap_${number - 1}`;
	return number % 2 === 0
		? `tap_${number} = ${before} * 47 kohm / (47 kohm + 120 ohm)`
		: `tap_${number} = ${before} + 12 mV`;
}
