import { javascriptLanguage } from '@codemirror/lang-javascript';
import { defineLanguageFacet, Language, languageDataProp } from '@codemirror/language';
import { NodeType, Parser, Tree, type Input, type PartialParse } from '@lezer/common';
import { splitLine } from '$lib/components/lines';

/** Lines whose trees are kept. */
const most = 5000;

const trees = new Map<string, Tree>();

/**
 * The tree of one line, by the grammar of JavaScript, whose brackets, numbers and texts in quotes are those of formulas.
 * Most lines are as they were at the key before.
 */
function treeOf(line: string): Tree {
	const known = trees.get(line);
	if (known) return known;
	if (trees.size >= most) trees.clear();
	const tree = javascriptLanguage.parser.parse(line.slice(0, splitLine(line).commentFrom));
	trees.set(line, tree);
	return tree;
}

const data = defineLanguageFacet();

const formulas = NodeType.define({
	id: 0,
	name: 'Formulas',
	top: true,
	props: [[languageDataProp, data]],
});

/** Parses each line for itself: no line means another thing because of what stands before it. */
class LineParser extends Parser {
	createParse(input: Input, _: unknown, ranges: readonly { from: number; to: number }[]) {
		const from = ranges[0]?.from ?? 0;
		const to = ranges.at(-1)?.to ?? input.length;
		const parse: PartialParse = {
			parsedPos: to,
			stoppedAt: null,
			stopAt: () => undefined,
			advance: () => {
				const children: Tree[] = [];
				const positions: number[] = [];
				let at = from;
				for (const line of input.read(from, to).split('\n')) {
					children.push(treeOf(line));
					positions.push(at - from);
					at += line.length + 1;
				}
				return new Tree(formulas, children, positions, to - from);
			},
		};
		return parse;
	}
}

/** Formulas as bracket matching asks for them. */
export const formulaGrammar = new Language(data, new LineParser(), [], 'formulas');
