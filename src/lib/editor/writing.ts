import { closeBrackets, closeBracketsKeymap } from '@codemirror/autocomplete';
import { bracketMatching } from '@codemirror/language';
import { Prec, type Extension } from '@codemirror/state';
import { keymap, type EditorView } from '@codemirror/view';
import type { NoteCell } from '$lib/note/document';
import { completion } from './completion';
import { explanation } from './explanation';
import { wordAt, type Found } from './facts';
import { noteContext } from './note-context';
import { overTheSheet } from './over-the-sheet';
import { definitionOf } from './uses';

/** What a cell's editor needs when somebody comes to it: offers, explanations, brackets. Loaded then, not with the page. */
export function writing(kind: NoteCell['kind']): Extension {
	return [
		overTheSheet(),
		completion(kind),
		explanation(kind),
		...(kind === 'text' ? [] : brackets),
	];
}

/** An opening bracket brings its closing one, which goes when the opening one is taken back. */
const brackets: Extension[] = [
	closeBrackets(),
	bracketMatching(),
	Prec.high(keymap.of(closeBracketsKeymap)),
];

/** Goes to where the name at the cursor is defined; gives whether it is a name of the note. */
export function goToDefinition(view: EditorView, kind: NoteCell['kind']): boolean {
	const note = view.state.facet(noteContext);
	const found = nameHere(view, kind);
	const place = note && found && definitionOf(note.cells, found.name);
	if (!place) return false;
	note.go(place);
	return true;
}

/** The name of the note's own at the cursor, to be renamed. */
export function nameHere(view: EditorView, kind: NoteCell['kind']): Found | undefined {
	const note = view.state.facet(noteContext);
	const { doc, selection } = view.state;
	const found = wordAt(kind, doc.toString(), selection.main.head);
	return note && found && !found.parameter && definitionOf(note.cells, found.name)
		? found
		: undefined;
}
