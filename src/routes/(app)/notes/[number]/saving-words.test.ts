import { expect, test } from 'vitest';
import { savingWords } from './saving-words';

const clock = (at: string) => at.slice(11, 16);

test('an acknowledged edit is said to be saved, with its time', () => {
	const at = '2026-10-14T10:42:31Z';
	expect(savingWords({ state: 'saved', count: 0, at }, true, clock)).toBe('Saved 10:42');
	expect(savingWords({ state: 'saved', count: 0 }, true, clock)).toBe('Saved');
});

test('nothing is called saved before the note is complete', () => {
	expect(savingWords({ state: 'saved', count: 0 }, false, clock)).toBe('Opening…');
});

test('edits that wait for the connection are counted', () => {
	expect(savingWords({ state: 'offline', count: 1 }, true, clock)).toBe(
		'Not saved: 1 change kept on this page',
	);
	expect(savingWords({ state: 'offline', count: 3 }, true, clock)).toBe(
		'Not saved: 3 changes kept on this page',
	);
});

test('a refused edit says why', () => {
	expect(savingWords({ state: 'refused', count: 0, reason: 'Too large.' }, true, clock)).toBe(
		'Refused: Too large.',
	);
});
