import { expect, test } from 'vitest';
import { pageFoot } from './page-foot';

test('the foot names the page and how many there are', () => {
	expect(pageFoot('MN-014, revision B', 'seal')).toContain('counter(page) " of " counter(pages)');
});

test('no text can leave its string', () => {
	const css = pageFoot('"; } </style><b>', 'x\\');
	expect(css).not.toContain('<');
	expect(css).not.toContain('x\\"');
	expect(css.match(/"/g)!.length % 2).toBe(0);
});
