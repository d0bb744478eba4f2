import { expect, test } from 'vitest';
import { savingNews, savingWords } from './saving-words';

const open = { ready: true, mayWrite: true };
const clock = (at: string) => at.slice(11, 16);

test('an acknowledged edit is said to be saved, with its time', () => {
	const at = '2026-10-14T10:42:31Z';
	expect(savingWords({ state: 'saved', count: 0, kept: 0, at }, open, clock)).toBe('Saved 10:42');
	expect(savingWords({ state: 'saved', count: 0, kept: 0 }, open, clock)).toBe('Saved');
});

test('nothing is called saved before the note is complete', () => {
	expect(
		savingWords({ state: 'saved', count: 0, kept: 0 }, { ready: false, mayWrite: false }, clock),
	).toBe('Opening…');
});

test('changes that wait for the connection are counted, and where they are kept is said', () => {
	const offline = { state: 'offline' as const, count: 3 };
	expect(savingWords({ ...offline, kept: 3 }, open, clock)).toBe(
		'Offline: 3 changes kept on this computer',
	);
	expect(savingWords({ ...offline, kept: 1 }, open, clock)).toBe(
		'Offline: 1 change kept on this computer',
	);
	expect(savingWords({ ...offline, kept: 0 }, open, clock)).toBe('Offline: 3 changes not saved');
	expect(savingWords({ ...offline, kept: 0, failure: 'No room.' }, open, clock)).toBe(
		'Offline: 3 changes on this page only. No room.',
	);
});

test('with every key the same is said to people who listen', () => {
	const offline = { state: 'offline' as const, kept: 0 };
	expect(savingNews({ ...offline, count: 1 })).toBe(savingNews({ ...offline, count: 2 }));
	expect(savingNews({ state: 'saving', count: 1, kept: 0 })).toBe('');
});

test('a refused edit says why', () => {
	expect(
		savingWords({ state: 'refused', count: 0, kept: 0, reason: 'Too large.' }, open, clock),
	).toBe('Refused: Too large.');
});

test('who may not write is told so instead of being told that something is saved', () => {
	const reading = { ready: true, mayWrite: false };
	expect(savingWords({ state: 'saved', count: 0, kept: 0 }, reading, clock)).toBe(
		'To read and comment',
	);
	expect(savingWords({ state: 'offline', count: 0, kept: 0 }, reading, clock)).toBe('Offline');
});

test('nothing is being saved before anything was changed', () => {
	expect(savingWords({ state: 'saving', count: 0, kept: 0 }, open, clock)).toBe('Opening…');
	expect(savingWords({ state: 'saving', count: 2, kept: 0 }, open, clock)).toBe('Saving');
});
