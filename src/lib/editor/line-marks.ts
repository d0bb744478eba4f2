import type { Extension, Range } from '@codemirror/state';
import {
	Decoration,
	EditorView,
	ViewPlugin,
	type DecorationSet,
	type ViewUpdate,
} from '@codemirror/view';
import { splitLine, type LineParts } from '$lib/components/lines';
import { typeset } from '$lib/calc/symbol';

/** Marks that set the name of a line apart, and the others that stand within it. */
interface Marks {
	names: DecorationSet;
	parts: DecorationSet;
}

/**
 * Sets each line as the sheet does: the defined name typeset in the symbol column, the formula beside it. The text
 * itself stays whole; a line with the cursor shows underscore, equals sign and Greek names as they are typed.
 */
export function lineMarks(kind: 'calculation' | 'requirement' | 'curve'): Extension {
	class LineMarks {
		marks: Marks;

		constructor(view: EditorView) {
			this.marks = marksOf(view, kind);
		}

		update(update: ViewUpdate): void {
			const { docChanged, selectionSet, focusChanged, viewportChanged } = update;
			if (docChanged || selectionSet || focusChanged || viewportChanged)
				this.marks = marksOf(update.view, kind);
		}
	}
	return ViewPlugin.fromClass(LineMarks, {
		decorations: (plugin) => plugin.marks.parts,
		provide: (plugin) =>
			EditorView.outerDecorations.of((view) => view.plugin(plugin)?.marks.names ?? Decoration.none),
	});
}

/** Marks of the lines that are drawn. */
function marksOf({ state, hasFocus: focused, viewport }: EditorView, kind: string): Marks {
	const names: Range<Decoration>[] = [];
	const parts: Range<Decoration>[] = [];
	const { doc, selection } = state;
	const last = doc.lineAt(viewport.to).number;
	for (let { number } = doc.lineAt(viewport.from); number <= last; number++) {
		const line = doc.line(number);
		const pieces = splitLine(line.text);
		const active =
			focused && selection.ranges.some((range) => range.to >= line.from && range.from <= line.to);
		parts.push(lineClass(pieces, kind, number === doc.lines).range(line.from));
		if (active) parts.push(activeLine.range(line.from));
		if (kind !== 'calculation' || pieces.name === undefined) continue;
		names.push(nameMark.range(line.from, line.from + pieces.formulaFrom));
		parts.push(...nameParts(line.from, line.text, pieces, active));
	}
	return { names: Decoration.set(names), parts: Decoration.set(parts, true) };
}

function lineClass({ kind: set }: LineParts, kind: string, last: boolean): Decoration {
	const name = kind !== 'calculation' && set !== 'comment' && set !== 'blank' ? kind : set;
	return Decoration.line({ class: `line line-${name}${last ? ' line-last' : ''}` });
}

const activeLine = Decoration.line({ class: 'line-active' });
const nameMark = Decoration.mark({ class: 'line-name' });
const hidden = Decoration.mark({ class: 'sym-hidden' });
const subscript = Decoration.mark({ class: 'sym-sub' });
const equals = Decoration.mark({ class: 'sym-eq' });
const activeEquals = Decoration.mark({ class: 'sym-eq sym-active' });

/** Shows a sign in place of the text that stands there. */
function shown(glyph: string): Decoration {
	return Decoration.mark({ class: 'sym-glyph', attributes: { 'data-glyph': glyph } });
}

function* nameParts(
	start: number,
	text: string,
	{ name = '', nameFrom, nameTo, formulaFrom }: LineParts,
	active: boolean,
): Generator<Range<Decoration>> {
	const symbol = typeset(name);
	const from = start + nameFrom;
	const baseTo = from + symbol.baseTo;
	const subFrom = from + symbol.subFrom;
	const nameEnd = start + nameTo;
	if (!active && symbol.glyph !== symbol.base) yield shown(symbol.glyph).range(from, baseTo);
	if (!active && subFrom > baseTo) yield hidden.range(baseTo, subFrom);
	if (nameEnd > subFrom) yield subscript.range(subFrom, nameEnd);
	for (
		let at = name.indexOf('_', symbol.subFrom);
		!active && at > 0;
		at = name.indexOf('_', at + 1)
	) {
		yield shown(',').range(from + at, from + at + 1);
	}
	const equalsAt = text.lastIndexOf('=', formulaFrom - 1);
	const equalsFrom = text.slice(0, equalsAt).trimEnd().length;
	yield (active ? activeEquals : equals).range(start + equalsFrom, start + formulaFrom);
}
