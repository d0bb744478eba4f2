import { RangeSetBuilder, type Extension } from '@codemirror/state';
import { Decoration, EditorView, ViewPlugin, type DecorationSet } from '@codemirror/view';

const ownDirection = Decoration.line({ attributes: { dir: 'auto' } });

/** Sets each line in the direction of its own script. */
export function ownDirections(): Extension {
	return [
		EditorView.perLineTextDirection.of(true),
		ViewPlugin.define(
			(view) => ({
				lines: linesOf(view),
				update({ docChanged, viewportChanged, view: now }) {
					if (docChanged || viewportChanged) this.lines = linesOf(now);
				},
			}),
			{ decorations: ({ lines }) => lines },
		),
	];
}

/** Marks of the lines that are drawn. */
function linesOf({ state: { doc }, visibleRanges }: EditorView): DecorationSet {
	const marks = new RangeSetBuilder<Decoration>();
	let done = 0;
	for (const { from, to } of visibleRanges) {
		for (let at = Math.max(from, done); at <= to; at = done) {
			const line = doc.lineAt(at);
			marks.add(line.from, line.from, ownDirection);
			done = line.to + 1;
		}
	}
	return marks.finish();
}
