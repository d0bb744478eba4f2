import { expect, test } from 'vitest';
import type { Thread } from './comments';
import { anyThread, isFiltering, isWanted, threadFilter } from './thread-filter';

const me = 'me';
const thread: Thread = {
	id: '1',
	cellId: 'c1',
	kind: 'question',
	blocking: false,
	closed: null,
	comments: [{ id: '2', person: { id: 'other', name: 'Other' }, body: 'Why?', at: '' }],
};
const closed = { at: '', by: 'Other' };
const mine = { ...thread.comments[0]!, person: { id: me, name: 'Me' } };
const named = { ...thread.comments[0]!, mentions: [{ id: me, name: 'Me' }] };

test.each([
	[{ open: true }, thread, true],
	[{ open: true }, { ...thread, closed }, false],
	[{ open: true }, { ...thread, answered: closed }, true],
	[{ blocking: true }, thread, false],
	[{ blocking: true }, { ...thread, blocking: true }, true],
	[{ mine: true }, thread, false],
	[{ mine: true }, { ...thread, comments: [mine] }, true],
	[{ named: true }, { ...thread, comments: [mine] }, false],
	[{ named: true }, { ...thread, comments: [mine, named] }, true],
	[{ kind: 'remark' as const }, thread, false],
	[{ kind: 'question' as const }, thread, true],
])('%o', (wanted, one, expected) => {
	expect(isWanted(one, { ...anyThread, ...wanted }, me)).toBe(expected);
});

test('an address says what is wanted, and what cannot be read wants everything', () => {
	expect(threadFilter.parse({})).toEqual(anyThread);
	expect(threadFilter.parse({ open: 'on', mine: 'off', kind: 'nonsense' })).toEqual({
		...anyThread,
		open: true,
	});
	expect(isFiltering(anyThread)).toBe(false);
	expect(isFiltering({ ...anyThread, kind: 'remark' })).toBe(true);
});
