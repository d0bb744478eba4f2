import { javascriptLanguage } from '@codemirror/lang-javascript';
import { HighlightStyle, syntaxHighlighting } from '@codemirror/language';
import type { EditorState, Extension, Range } from '@codemirror/state';
import { Decoration, ViewPlugin, type EditorView, type ViewUpdate } from '@codemirror/view';
import { tags } from '@lezer/highlight';
import { splitLine, tokenize } from '$lib/components/lines';

const style = HighlightStyle.define([
	{ tag: tags.number, class: 'tk-number' },
	{ tag: tags.string, class: 'tk-string' },
]);
const call = Decoration.mark({ class: 'tk-call' });
const comment = Decoration.mark({ class: 'tk-comment' });

/**
 * Colours of formulas. The grammar of JavaScript fits their numbers, strings and brackets; what differs from it, the
 * comments and what counts as a call, is marked here.
 */
export function formulaColours(): Extension {
	class Colours {
		decorations;

		constructor(view: EditorView) {
			this.decorations = coloured(view.state);
		}

		update(update: ViewUpdate): void {
			if (update.docChanged) this.decorations = coloured(update.state);
		}
	}
	return [
		javascriptLanguage,
		syntaxHighlighting(style),
		ViewPlugin.fromClass(Colours, { decorations: (plugin) => plugin.decorations }),
	];
}

function coloured({ doc }: EditorState) {
	const ranges: Range<Decoration>[] = [];
	for (let number = 1; number <= doc.lines; number++) {
		const line = doc.line(number);
		// What stands before a definition's equals sign is typeset as a name.
		const { formulaFrom } = splitLine(line.text);
		let at = line.from + formulaFrom;
		for (const { kind, text } of tokenize(line.text.slice(formulaFrom))) {
			const to = at + text.length;
			if (kind === 'call') ranges.push(call.range(at, to));
			if (kind === 'comment') ranges.push(comment.range(at, to));
			at = to;
		}
	}
	return Decoration.set(ranges);
}
