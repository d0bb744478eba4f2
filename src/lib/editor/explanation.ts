import { Prec, StateEffect, StateField, type EditorState, type Extension } from '@codemirror/state';
import {
	closeHoverTooltips,
	hoverTooltip,
	keymap,
	showTooltip,
	type EditorView,
	type Tooltip,
} from '@codemirror/view';
import type { NoteCell } from '$lib/note/document';
import { cardOf } from './fact-card';
import { factOf, wordAt } from './facts';
import { noteContext } from './note-context';
import { vocabulary } from './vocabulary';

/** Says of the word under the pointer what it is, its value, and where it comes from. */
export function explanation(kind: NoteCell['kind']): Extension {
	return [
		hoverTooltip(async (view, at) => explain(view.state, at, kind), {
			hideOnChange: true,
			hoverTime: 350,
		}),
		asked,
		// Before the key that leaves the editor.
		Prec.highest(
			keymap.of([
				{
					key: 'Escape',
					run: (view) => {
						if (!view.state.field(asked)) return false;
						view.dispatch({ effects: ask.of(null) });
						return true;
					},
				},
			]),
		),
	];
}

/** Says the same of the word at the cursor, until the cursor moves on or it is asked again. */
export async function explainHere(view: EditorView, kind: NoteCell['kind']): Promise<void> {
	view.dispatch({ effects: closeHoverTooltips });
	if (view.state.field(asked, false)) {
		view.dispatch({ effects: ask.of(null) });
		return;
	}
	const { state } = view;
	const tooltip = await explain(state, state.selection.main.head, kind);
	if (tooltip && view.state.doc.eq(state.doc)) view.dispatch({ effects: ask.of(tooltip) });
}

const ask = StateEffect.define<Tooltip | null>();
const asked = StateField.define<Tooltip | null>({
	create: () => null,
	update(value, transaction) {
		for (const effect of transaction.effects) if (effect.is(ask)) return effect.value;
		return transaction.docChanged || transaction.selection ? null : value;
	},
	provide: (field) => showTooltip.from(field),
});

async function explain(
	state: EditorState,
	at: number,
	kind: NoteCell['kind'],
): Promise<Tooltip | null> {
	const note = state.facet(noteContext);
	const found = wordAt(kind, state.doc.toString(), at);
	if (!note || !found) return null;
	const words = await vocabulary();
	const fact = factOf(found, { cells: note.cells, evaluation: note.evaluation, words });
	if (!fact) return null;
	return {
		pos: found.from,
		end: found.to,
		above: true,
		create: () => cardOf(fact, note),
	};
}
