import { HighlightStyle, StreamLanguage, syntaxHighlighting } from '@codemirror/language';
import type { Extension } from '@codemirror/state';
import { Tag } from '@lezer/highlight';
import { splitLine, tokenize, type Token } from '$lib/components/lines';

type Coloured = Exclude<Token['kind'], 'plain' | 'name'>;

const tags: Record<Coloured, Tag> = {
	call: Tag.define(),
	number: Tag.define(),
	unit: Tag.define(),
	string: Tag.define(),
	comment: Tag.define(),
};

/** Pieces of the line that is being read, and which of them comes next. */
interface Reading {
	pieces: readonly { kind: Token['kind']; to: number }[];
	next: number;
}

/** The language of formulas for editors; its words are cut as those of the sheet are. */
const language = StreamLanguage.define<Reading>({
	name: 'formula',
	startState: () => ({ pieces: [], next: 0 }),
	copyState: (state) => ({ ...state }),
	token(stream, state) {
		if (stream.sol()) {
			state.pieces = piecesOf(stream.string);
			state.next = 0;
		}
		const piece = state.pieces[state.next++];
		stream.pos = Math.max(stream.pos + 1, piece?.to ?? stream.string.length);
		return piece && piece.kind !== 'plain' && piece.kind !== 'name' ? piece.kind : null;
	},
	tokenTable: tags,
	languageData: {
		closeBrackets: { brackets: ['(', '[', '"'] },
		commentTokens: { line: '#' },
	},
});

/** What stands before a definition's equals sign is set as a name, in no colour. */
function piecesOf(line: string): Reading['pieces'] {
	const { formulaFrom } = splitLine(line);
	let to = formulaFrom;
	const pieces = tokenize(line.slice(formulaFrom)).map(({ kind, text }) => ({
		kind,
		to: (to += text.length),
	}));
	return formulaFrom > 0 ? [{ kind: 'plain', to: formulaFrom }, ...pieces] : pieces;
}

/** Classes of the colours. */
export const style = HighlightStyle.define(
	Object.entries(tags).map(([kind, tag]) => ({ tag, class: `tk-${kind}` })),
);

/** Formulas: their words for colours, brackets and comments. */
export function formulaLanguage(): Extension {
	return [language, syntaxHighlighting(style)];
}
