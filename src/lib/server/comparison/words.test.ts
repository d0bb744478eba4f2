import { applyPatch, createPatch } from 'diff';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Part } from '$lib/schemas/comparison';
import { hunksOf, partsOf } from './words';

const side = (parts: readonly Part[], left: Part['kind']) =>
	parts
		.filter(({ kind }) => kind !== left)
		.map(({ text }) => text)
		.join('');
const marked = (from: string, to: string) =>
	partsOf(from, to)
		.map(
			({ kind, text }) => ({ same: text, deleted: `[-${text}-]`, inserted: `[+${text}+]` })[kind],
		)
		.join('');

/** Texts that have lines and words in common, now and then a sign that is no letter of ours. */
const line = fc
	.array(fc.constantFrom('the', 'divider', 'gives', '39.0', '{{V_out}}', 'kΩ', '🔧', ','), {
		maxLength: 6,
	})
	.map((words) => words.join(' '));
const text = fc.oneof(
	fc.array(line, { maxLength: 8 }).map((lines) => lines.join('\n')),
	fc.string({ unit: 'binary', maxLength: 40 }),
);

test('a number is exchanged whole, and words that were rewritten together are one change', () => {
	expect(marked('R2 is 39.0 kohm', 'R2 is 38.3 kohm')).toBe('R2 is [-39.0-][+38.3+] kohm');
	expect(marked('the old words stay', 'some other words stay')).toBe(
		'[-the old-][+some other+] words stay',
	);
	expect(marked('a  b', 'a b')).toBe('a[-  -][+ +]b');
});

test('what is the same and deleted is the old text, what is the same and inserted the new one', () => {
	fc.assert(
		fc.property(text, text, (from, to) => {
			const parts = partsOf(from, to);
			expect(side(parts, 'inserted')).toBe(from);
			expect(side(parts, 'deleted')).toBe(to);
			expect(parts.every((part) => part.text !== '')).toBe(true);
		}),
	);
});

test('told the other way round, what was deleted is inserted', () => {
	const exchanged = { same: 'same', deleted: 'inserted', inserted: 'deleted' } as const;
	fc.assert(
		fc.property(text, text, (from, to) => {
			const order = (parts: Part[]) => parts.map(({ kind, text }) => `${kind} ${text}`).sort();
			const back = partsOf(to, from).map((part) => ({ ...part, kind: exchanged[part.kind] }));
			expect(order(back)).toEqual(order(partsOf(from, to)));
		}),
	);
});

/** The old text with the lines of each hunk in place of those it names. */
function applied(from: string, to: string): string {
	const lines = from.split('\n');
	for (const { fromLine, parts } of hunksOf(from, to).reverse()) {
		const old = side(parts, 'inserted').split('\n');
		expect(lines.slice(fromLine - 1, fromLine - 1 + old.length)).toEqual(old);
		lines.splice(fromLine - 1, old.length, ...side(parts, 'deleted').split('\n'));
	}
	return lines.join('\n');
}

test('the hunks applied to the old text give what the patch of jsdiff gives: the new one', () => {
	const lines = fc.array(line, { minLength: 1, maxLength: 12 }).map((all) => all.join('\n'));
	fc.assert(
		fc.property(lines, lines, (from, to) => {
			expect(applyPatch(from, createPatch('cell', from, to))).toBe(to);
			expect(applied(from, to)).toBe(to);
		}),
	);
});

test('texts that have nothing in common are exchanged as a whole, however long they are', () => {
	const long = (word: string) => Array.from({ length: 20_000 }, (_, i) => `${word}${i}`).join(' ');
	const from = performance.now();
	const parts = partsOf(long('a'), long('b'));
	expect(performance.now() - from).toBeLessThan(2000);
	expect(side(parts, 'inserted')).toBe(long('a'));
	expect(side(parts, 'deleted')).toBe(long('b'));
});
