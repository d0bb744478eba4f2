import { ensureSyntaxTree, indentUnit } from '@codemirror/language';
import { EditorState } from '@codemirror/state';
import { highlightTree } from '@lezer/highlight';
import { expect, test } from 'vitest';
import { formulaLanguage, style } from './formula-language';

/** Colours of a source, as classes with what they colour. */
function coloured(doc: string): string[] {
	const state = EditorState.create({ doc, extensions: [formulaLanguage(), indentUnit.of('\t')] });
	const found: string[] = [];
	highlightTree(ensureSyntaxTree(state, doc.length, 5_000)!, style, (from, to, name) =>
		found.push(`${name.replace('tk-', '')} ${doc.slice(from, to)}`),
	);
	return found;
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
