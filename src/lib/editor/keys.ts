import { Prec, type Extension } from '@codemirror/state';
import { keymap, type EditorView } from '@codemirror/view';

/** What a cell's editor asks of the sheet around it. */
export interface Neighbours {
	undo: () => void;
	redo: () => void;
	/** The cursor leaves over the first (-1) or last (1) line. Gives whether there was somewhere to go. */
	leave: (direction: -1 | 1) => boolean;
	/** Escape: the person is done with this cell. */
	finish: () => void;
}

/** Keys that reach beyond one cell. Tab is left to the page, so that the keyboard is never caught. */
export function keys({ undo, redo, leave, finish }: Neighbours): Extension {
	const always = (verb: () => void) => () => {
		verb();
		return true;
	};
	return Prec.high(
		keymap.of([
			{ key: 'Mod-z', run: always(undo), preventDefault: true },
			{ key: 'Mod-Shift-z', run: always(redo), preventDefault: true },
			{ key: 'Mod-y', run: always(redo), preventDefault: true },
			{ key: 'ArrowUp', run: (view) => atEdge(view, -1) && leave(-1) },
			{ key: 'ArrowDown', run: (view) => atEdge(view, 1) && leave(1) },
			{ key: 'Escape', run: always(finish) },
		]),
	);
}

/** Whether the cursor stands on the first or last line as it is seen; a wrapped line counts as several. */
function atEdge(view: EditorView, direction: -1 | 1): boolean {
	const { main } = view.state.selection;
	if (!main.empty) return false;
	const here = view.coordsAtPos(main.head);
	const edge = view.coordsAtPos(direction < 0 ? 0 : view.state.doc.length);
	return here !== null && edge !== null && Math.abs(here.bottom - edge.bottom) < 8;
}
