import { expect, test } from 'vitest';
import { pageFoot } from './page-foot';

const foot = {
	number: 'MN-014',
	title: 'Station battery voltage channel',
	revision: 'B',
	signOffs: [],
	seal: 'seal 1·2·3',
};

test('the foot names the page and how many there are', () => {
	expect(pageFoot(foot)).toContain('counter(page) " of " counter(pages)');
});

test('the foot says who signed and when', () => {
	const signOff = {
		meaning: 'prepared' as const,
		name: 'Pia Ekdahl',
		personId: '1',
		at: '2026-10-14T09:12:00Z',
		reason: null,
	};
	const css = pageFoot({ ...foot, signOffs: [signOff] });
	expect(css).toContain('"prepared Pia Ekdahl, 14 Oct 2026"');
	expect(css).toContain('"checked waiting"');
});

test('a long title is cut, and the cut is seen', () => {
	const css = pageFoot({ ...foot, title: 'long '.repeat(40) });
	expect(css).not.toContain('long '.repeat(20));
	expect(css).toContain('\\2026 "');
});

test('no text can leave its string', () => {
	const css = pageFoot({ ...foot, title: '"; } </style><b>', seal: 'x\\' });
	expect(css).not.toContain('<');
	expect(css).not.toContain('x\\"');
	expect(css.match(/"/g)!.length % 2).toBe(0);
});
