import { StateEffect, StateField, type Extension } from '@codemirror/state';
import { Decoration, EditorView, type DecorationSet } from '@codemirror/view';

/** A stretch of a cell that a comment is about. */
interface CommentMark {
	threadId: string;
	from: number;
	to: number;
	/** Its comment is the one that is looked at. */
	chosen: boolean;
}

const arrived = StateEffect.define<readonly CommentMark[]>();

const field = StateField.define<DecorationSet>({
	create: () => Decoration.none,
	update(value, transaction) {
		const marks = transaction.effects.findLast((effect) => effect.is(arrived))?.value;
		if (!marks) return value.map(transaction.changes);
		const { length } = transaction.newDoc;
		return Decoration.set(
			marks
				.filter(({ from, to }) => from < to && to <= length)
				.map(({ threadId, from, to, chosen }) =>
					Decoration.mark({
						class: chosen ? 'commented commented-chosen' : 'commented',
						attributes: { 'data-about': threadId },
					}).range(from, to),
				),
			true,
		);
	},
	provide: (self) => EditorView.decorations.from(self),
});

/** Marks what comments are about. A click on a mark chooses its comment. */
export function commentMarks(onchoose: (threadId: string) => void): Extension {
	return [
		field,
		EditorView.domEventHandlers({
			click: ({ target }) => {
				const mark = target instanceof Element && target.closest<HTMLElement>('[data-about]');
				if (mark && mark.dataset.about !== undefined) onchoose(mark.dataset.about);
			},
		}),
	];
}

/** Shows the comments' stretches in an editor's cell. */
export function showComments(view: EditorView, marks: readonly CommentMark[]): void {
	if (marks.length === 0 && view.state.field(field).size === 0) return;
	view.dispatch({ effects: arrived.of(marks) });
}
