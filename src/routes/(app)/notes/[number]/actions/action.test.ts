import { expect, test } from 'vitest';
import { chordOf, matching, printedKeys } from './action';

const pressed = (keys: Partial<KeyboardEvent>) =>
	chordOf({
		altKey: true,
		shiftKey: false,
		ctrlKey: false,
		metaKey: false,
		code: '',
		...keys,
	} as KeyboardEvent);

test('keys are known by their letter, and by their place where Alt writes another sign', () => {
	expect(pressed({ key: 'G', code: 'KeyG', shiftKey: true })).toBe('Alt+Shift+G');
	expect(pressed({ key: '˝', code: 'KeyG', shiftKey: true })).toBe('Alt+Shift+G');
	expect(pressed({ key: 'y', code: 'KeyZ', shiftKey: true })).toBe('Alt+Shift+Y');
	expect(pressed({ key: 'PageDown', code: 'PageDown' })).toBe('Alt+PageDown');
});

test('what is typed as text, with AltGr or without Alt, is no action', () => {
	expect(pressed({ key: 'g', code: 'KeyG', altKey: false })).toBeUndefined();
	expect(pressed({ key: '@', code: 'KeyQ', ctrlKey: true })).toBeUndefined();
	expect(pressed({ key: 'g', code: 'KeyG', isComposing: true })).toBeUndefined();
});

test('keys are shown as the keyboard has them', () => {
	expect(printedKeys('Alt+Shift+G', false)).toBe('Alt+Shift+G');
	expect(printedKeys('Alt+Shift+PageUp', true)).toBe('⌥ ⇧ Page ↑');
	expect(printedKeys('Mod+Z', false)).toBe('Ctrl+Z');
});

test('actions are found by any of their words', () => {
	const actions = [{ name: 'Add text below' }, { name: 'Move down' }, { name: 'Text of the note' }];
	const names = (typed: string) => matching(actions, typed).map(({ name }) => name);
	expect(names('text')).toEqual(['Text of the note', 'Add text below']);
	expect(names('BELOW text')).toEqual(['Add text below']);
	expect(names('')).toHaveLength(3);
	expect(names('nothing')).toEqual([]);
});
