import { matchBrackets, syntaxTree } from '@codemirror/language';
import { EditorState, Text } from '@codemirror/state';
import { expect, test } from 'vitest';
import { colouredIn, formulaLanguage } from './formula-language';

/** Colours of a source, with what they colour. */
function coloured(source: string): string[] {
	const doc = Text.of(source.split('\n'));
	return [...colouredIn(doc)].map(({ kind, from, to }) => `${kind} ${source.slice(from, to)}`);
}

test('calls, numbers with units, texts and comments have their colours, names and signs none', () => {
	expect(
		coloured('R2 = preferred(R2exact, E24) + 4.7 kΩ # why 3\n\n# 1 V\nr = rkm("4k7")'),
	).toEqual([
		'call preferred',
		'number 4.7',
		'unit kΩ',
		'comment # why 3',
		'comment # 1 V',
		'call rkm',
		'string "4k7"',
	]);
});

test('the name that a line defines has no colour, also that of a function', () => {
	expect(coloured('f(x) = 2 * x')).toEqual(['number 2']);
});

test('brackets match, and close and comment as those of formulas do', () => {
	const doc = 'a = (1 + [2, 3][1])';
	const state = EditorState.create({ doc, extensions: formulaLanguage() });
	expect(matchBrackets(state, 4, 1)).toMatchObject({
		matched: true,
		end: { from: doc.length - 1 },
	});
	const [first] = state.languageDataAt<{ brackets: string[] }>('closeBrackets', 5);
	expect(first?.brackets).toEqual(['(', '[', '"']);
	expect(state.languageDataAt<{ line: string }>('commentTokens', 5)[0]?.line).toBe('#');
});

test('a bracket in a text in quotes, a comment or another line is no partner', () => {
	const doc = 'a = (1 + size(")")) # )\nb = 2)';
	const state = EditorState.create({ doc, extensions: formulaLanguage() });
	expect(matchBrackets(state, 4, 1)).toMatchObject({
		matched: true,
		end: { from: doc.indexOf(') #') },
	});
});

test('a changed line is parsed anew, the others lie where they moved to', () => {
	let state = EditorState.create({
		doc: 'a = (1)\nb = [2]\nc = (3)',
		extensions: formulaLanguage(),
	});
	state = state.update({ changes: { from: 8, insert: 'x = ((4))\n' } }).state;
	const at = state.doc.toString().indexOf('(3');
	expect(matchBrackets(state, at, 1)).toMatchObject({ matched: true, end: { from: at + 2 } });
	expect(syntaxTree(state).length).toBe(state.doc.length);
});
