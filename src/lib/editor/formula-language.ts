import { EditorState, Prec, type Extension, type Range, type Text } from '@codemirror/state';
import { Decoration, ViewPlugin, type EditorView, type ViewUpdate } from '@codemirror/view';
import { splitLine, tokenize, type Token } from '$lib/components/lines';
import { formulaGrammar } from './formula-grammar';

type Coloured = Exclude<Token['kind'], 'plain' | 'name'>;

const marks: Record<Coloured, Decoration> = {
	call: Decoration.mark({ class: 'tk-call' }),
	number: Decoration.mark({ class: 'tk-number' }),
	unit: Decoration.mark({ class: 'tk-unit' }),
	string: Decoration.mark({ class: 'tk-string' }),
	comment: Decoration.mark({ class: 'tk-comment' }),
};

/** A stretch of text that has a colour. */
interface Piece {
	kind: Coloured;
	from: number;
	to: number;
}

/** What has a colour in formulas, line by line; the words are cut as those of the sheet are. */
export function* colouredIn(doc: Text, first = 1, last = doc.lines): Generator<Piece> {
	for (let number = first; number <= last; number++) {
		const line = doc.line(number);
		// What stands before a definition's equals sign is set as a name, in no colour.
		const { formulaFrom } = splitLine(line.text);
		let from = line.from + formulaFrom;
		for (const { kind, text } of tokenize(line.text.slice(formulaFrom))) {
			const to = from + text.length;
			if (kind !== 'plain' && kind !== 'name') yield { kind, from, to };
			from = to;
		}
	}
}

class Colours {
	decorations;

	constructor(view: EditorView) {
		this.decorations = decorate(view);
	}

	update({ docChanged, viewportChanged, view }: ViewUpdate): void {
		if (docChanged || viewportChanged) this.decorations = decorate(view);
	}
}

/** Marks of the lines that are drawn: a long cell is not cut anew at each key. */
function decorate({ state: { doc }, viewport }: EditorView) {
	const ranges: Range<Decoration>[] = [];
	const [first, last] = [doc.lineAt(viewport.from).number, doc.lineAt(viewport.to).number];
	for (const { kind, from, to } of colouredIn(doc, first, last))
		ranges.push(marks[kind].range(from, to));
	return Decoration.set(ranges);
}

/**
 * Formulas: their words for colours, brackets and comments. The engine alone decides what a line means; what lies under
 * them only knows brackets, numbers and texts in quotes.
 */
export function formulaLanguage(): Extension {
	return [
		// Before those of JavaScript, whose nodes the lines are made of.
		Prec.high(
			EditorState.languageData.of(() => [
				{
					closeBrackets: { brackets: ['(', '[', '"'] },
					commentTokens: { line: '#' },
				},
			]),
		),
		formulaGrammar,
		ViewPlugin.fromClass(Colours, { decorations: (plugin) => plugin.decorations }),
	];
}
