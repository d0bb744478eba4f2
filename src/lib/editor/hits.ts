import { StateEffect, StateField, type Extension } from '@codemirror/state';
import { Decoration, EditorView, type DecorationSet } from '@codemirror/view';

interface Hit {
	from: number;
	to: number;
	/** The one that the person is at. */
	current: boolean;
}

const arrived = StateEffect.define<readonly Hit[]>();
const plain = Decoration.mark({ class: 'hit' });
const chosen = Decoration.mark({ class: 'hit hit-current' });

const field = StateField.define<DecorationSet>({
	create: () => Decoration.none,
	update(value, transaction) {
		const hits = transaction.effects.findLast((effect) => effect.is(arrived))?.value;
		if (!hits) return value.map(transaction.changes);
		const { length } = transaction.newDoc;
		return Decoration.set(
			hits
				.filter(({ from, to }) => from < to && to <= length)
				.map(({ from, to, current }) => (current ? chosen : plain).range(from, to)),
		);
	},
	provide: (self) => EditorView.decorations.from(self),
});

/** Marks what was found in a cell. */
export function hits(): Extension {
	return field;
}

/** Shows what was found in an editor's cell. */
export function showHits(view: EditorView, found: readonly Hit[]): void {
	if (found.length === 0 && view.state.field(field).size === 0) return;
	view.dispatch({ effects: arrived.of(found) });
}
