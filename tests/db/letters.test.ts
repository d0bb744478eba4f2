import { expect, test } from 'vitest';
import { letterOf } from '$lib/server/revisions/letters';

/** Every word of 1, 2 and 3 letters in order, without those that hold a letter which is skipped. */
function* words(): Generator<string> {
	const letters = Array.from({ length: 26 }, (_, index) => String.fromCharCode(65 + index));
	let longer = [''];
	for (let length = 1; length <= 3; length++) {
		longer = longer.flatMap((word) => letters.map((letter) => word + letter));
		yield* longer.filter((word) => !/[IOQSXZ]/.test(word));
	}
}

test('the first 500 letters skip I, O, Q, S, X and Z, and AA follows Y (ASME Y14.35)', () => {
	const expected = [...words()].slice(0, 500);
	expect(Array.from({ length: 500 }, (_, index) => letterOf(index + 1))).toEqual(expected);
	expect([1, 8, 9, 13, 14, 20, 21, 40, 41].map(letterOf)).toEqual(
		'A H J N P Y AA AY BA'.split(' '),
	);
});
