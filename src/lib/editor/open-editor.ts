import { defaultKeymap, insertNewline, insertNewlineKeepIndent } from '@codemirror/commands';
import { Compartment, EditorState, type Extension } from '@codemirror/state';
import { EditorView, keymap, placeholder, type KeyBinding } from '@codemirror/view';
import { yCollab } from 'y-codemirror.next';
import type { Awareness } from 'y-protocols/awareness';
import type * as Y from 'yjs';
import type { CellKind } from '$lib/note/document';
import { commentMarks } from './comment-marks';
import { formulaLanguage } from './formula-language';
import { hits } from './hits';
import { keys, type Neighbours } from './keys';
import { lineMarks } from './line-marks';
import { look } from './look';
import { noteContext, type NoteContext } from './note-context';
import { ownDirections } from './own-direction';
import { results } from './results';
import { singleLine } from './single-line';

interface Choices {
	parent: HTMLElement;
	text: Y.Text;
	awareness: Awareness;
	undoManager: Y.UndoManager;
	kind: CellKind | 'title';
	/** Accessible name. */
	label: string;
	hint: string;
	readOnly: boolean;
	neighbours: Neighbours;
	/** The note around the cell; a title has none. */
	note?: NoteContext;
	onfocus: (focused: boolean) => void;
	/** A stretch was clicked that a comment is about. */
	onchoose?: (threadId: string) => void;
}

/** Opens an editor on a shared text. Call `destroy` on what it gives. */
export function openEditor(choices: Choices): EditorView {
	const { parent, text, awareness, undoManager, kind, readOnly, note } = choices;
	const later = new Compartment();
	let wanted = kind !== 'title' && note !== undefined;
	// A page opens with many editors, of which a person uses one: what helps with writing comes when it is wanted.
	const arrive = () => {
		if (!wanted || kind === 'title') return;
		wanted = false;
		void import('./writing').then(
			({ writing }) => view.dispatch({ effects: later.reconfigure(writing(kind)) }),
			() => (wanted = true),
		);
	};
	const view = new EditorView({
		parent,
		doc: text.toJSON(),
		extensions: [
			keys(choices.neighbours),
			keymap.of([enter(kind), ...defaultKeymap]),
			yCollab(text, awareness, { undoManager }),
			look(),
			placeholder(choices.hint),
			EditorState.readOnly.of(readOnly),
			EditorView.editable.of(!readOnly),
			EditorView.contentAttributes.of({
				'aria-label': choices.label,
				'aria-multiline': String(kind !== 'title'),
				spellcheck: String(kind === 'text' || kind === 'title'),
				autocapitalize: kind === 'text' || kind === 'title' ? 'sentences' : 'off',
				autocorrect: 'off',
			}),
			later.of([]),
			...(note ? [noteContext.of(note)] : []),
			EditorView.domEventHandlers({
				mouseover: arrive,
				focus: () => {
					arrive();
					choices.onfocus(true);
				},
				blur: () => choices.onfocus(false),
			}),
			ofKind(kind),
			...(choices.onchoose ? [commentMarks(choices.onchoose)] : []),
		],
	});
	return view;
}

/** A formula goes on no second line, so nothing is indented for it. */
function enter(kind: Choices['kind']): KeyBinding {
	return { key: 'Enter', run: kind === 'text' ? insertNewlineKeepIndent : insertNewline };
}

function ofKind(kind: Choices['kind']): Extension {
	if (kind === 'title') return [singleLine(), ownDirections()];
	if (kind === 'text') return [hits(), ownDirections()];
	return [lineMarks(kind), formulaLanguage(), results(), hits()];
}
