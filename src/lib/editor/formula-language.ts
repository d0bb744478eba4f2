import { EditorState, type Extension, type Range, type Text } from '@codemirror/state';
import { Decoration, ViewPlugin, type EditorView, type ViewUpdate } from '@codemirror/view';
import { splitLine, tokenize, type Token } from '$lib/components/lines';

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

/** What has a colour in formulas; the words are cut as those of the sheet are. */
export function* colouredIn(doc: Text): Generator<Piece> {
	for (let number = 1; number <= doc.lines; number++) {
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

	constructor({ state }: EditorView) {
		this.decorations = decorate(state);
	}

	update({ docChanged, state }: ViewUpdate): void {
		if (docChanged) this.decorations = decorate(state);
	}
}

function decorate({ doc }: EditorState) {
	const ranges: Range<Decoration>[] = [];
	for (const { kind, from, to } of colouredIn(doc)) ranges.push(marks[kind].range(from, to));
	return Decoration.set(ranges);
}

/**
 * Formulas: their words for colours, brackets and comments. No grammar lies under them: the engine alone decides what a
 * line means, and a parser that mends what it does not know takes longer for a long cell than a key may.
 */
export function formulaLanguage(): Extension {
	return [
		EditorState.languageData.of(() => [
			{
				closeBrackets: { brackets: ['(', '[', '"'] },
				commentTokens: { line: '#' },
			},
		]),
		ViewPlugin.fromClass(Colours, { decorations: (plugin) => plugin.decorations }),
	];
}
