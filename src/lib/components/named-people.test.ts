import { expect, test } from 'vitest';
import { nameBegun, withNames } from './named-people';

test('a comment is cut at the people it names, and nothing of it is lost', () => {
	const body = '@Cass Kettering and @Cass: see {{V}}, @Nobody.';
	const pieces = withNames(body, [{ name: 'Cass' }, { name: 'Cass Kettering' }]);
	expect(pieces.filter(({ isName }) => isName).map(({ text }) => text)).toEqual([
		'@Cass Kettering',
		'@Cass',
	]);
	expect(pieces.map(({ text }) => text).join('')).toBe(body);
	expect(withNames('plain', [])).toEqual([{ text: 'plain', isName: false }]);
});

test.each([
	['Ask @', 5, { from: 4, typed: '' }],
	['Ask @Cass K', 11, { from: 4, typed: 'Cass K' }],
	['(@An', 4, { from: 1, typed: 'An' }],
	['mail@firm', 9, undefined],
	['@Cass Kettering asks', 3, { from: 0, typed: 'Ca' }],
	['nothing', 7, undefined],
])('in %s at %i', (text, caret, expected) => {
	expect(nameBegun(text, caret)).toEqual(expected);
});
