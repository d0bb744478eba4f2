import { expect, test } from 'vitest';
import { tallyMarks, tallyName } from './tally';

test('each requirement has a mark, best first', () => {
	const marks = tallyMarks({ met: 2, undecided: 1, notMet: 1 });
	expect(marks.map((mark) => mark.verdict)).toEqual(['met', 'met', 'undecided', 'notMet']);
});

test('many requirements are counted instead', () => {
	expect(tallyMarks({ met: 15, undecided: 0, notMet: 2 })).toEqual([
		{ verdict: 'met', count: 15 },
		{ verdict: 'notMet', count: 2 },
	]);
});

test('the label has all three counts', () => {
	expect(tallyName({ met: 3, undecided: 1, notMet: 0 })).toBe('3 met, 1 undecided, 0 not met');
});
