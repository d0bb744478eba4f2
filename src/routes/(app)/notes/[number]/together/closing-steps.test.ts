import { expect, test } from 'vitest';
import { closeCode, closeSentence } from '$lib/protocol/closing';
import { stepAfter } from './closing-steps';

test('every closing is explained, and one that is final offers something to do', () => {
	const plain = closeSentence(0);
	for (const [name, code] of Object.entries(closeCode)) {
		const isFinal = (code >= 4400 && code < 4500) || code === closeCode.tooBig;
		expect([name, stepAfter(code) === 'wait']).toEqual([name, !isFinal]);
		if (isFinal) expect(closeSentence(code)).not.toBe(plain);
	}
	expect(stepAfter(undefined)).toBe('reload');
});
