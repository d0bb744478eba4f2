import type { Meaning, SignOff } from '$lib/schemas/review';
import { expect, test } from 'vitest';
import { signatureFields } from './signature-fields';

const signed = (meaning: Meaning): SignOff => ({
	meaning,
	name: 'Somebody',
	personId: 'p1',
	at: '2026-10-14T09:12:00.000Z',
	reason: null,
});
const waiting = (...meanings: Meaning[]) =>
	signatureFields(meanings.map(signed))
		.filter((field) => field.waiting)
		.map((field) => field.meaning);

test('a draft waits for no signature', () => {
	expect(waiting()).toEqual([]);
});

test('the next sign-off waits, the one behind it does not yet', () => {
	expect(waiting('prepared')).toEqual(['checked']);
	expect(waiting('prepared', 'checked')).toEqual(['approved']);
	expect(waiting('prepared', 'checked', 'approved')).toEqual([]);
});

test('what was returned waits for nothing', () => {
	expect(waiting('prepared', 'returned')).toEqual([]);
});
