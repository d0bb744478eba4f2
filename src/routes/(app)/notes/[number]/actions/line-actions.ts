import { splitLine } from '$lib/components/lines';
import { mendHere } from '$lib/editor/results';
import { askToSet } from '../readout/click-to-set';
import type { Sheet } from '../sheet.svelte';
import { commentHere } from '../comment-here';
import { beginTrial } from '../trial/trial-deeds';
import type { Action } from './action';

const load = () => import('$lib/editor/writing');

/** What can be done at the cursor of the editor that has the focus, or had it last. */
export function lineActions(sheet: Sheet): Action[] {
	const { active, copy } = sheet;
	if (!active?.view.dom.isConnected) return [];
	const { view, kind } = active;
	const nothing = () => (sheet.told = 'There is no name of this note at the cursor.');
	const actions: Action[] = [
		{
			name: 'Say what this is',
			keys: 'Alt+Shift+W',
			run: () =>
				void import('$lib/editor/explanation').then(({ explainHere }) => explainHere(view, kind)),
		},
		{
			name: 'Go to its definition',
			keys: 'Alt+Shift+G',
			run: () => void load().then((writing) => writing.goToDefinition(view, kind) || nothing()),
			keepsFocus: true,
		},
	];
	actions.push({
		name: 'Comment on the words selected, or on this line',
		keys: 'Alt+Shift+Q',
		run: () => commentHere(sheet),
		keepsFocus: true,
	});
	if (kind !== 'text') {
		actions.push({
			name: 'Open or close what is behind the line',
			keys: 'Alt+Shift+O',
			run: () => {
				const { text } = view.state.doc.lineAt(view.state.selection.main.head);
				const { name } = splitLine(text);
				if (name !== undefined && sheet.line.quantityOf(name)) sheet.line.toggle(name);
				else sheet.told = 'There is nothing behind this line.';
			},
		});
	}
	actions.push({
		name: 'Draw what hangs together with it',
		keys: 'Alt+Shift+P',
		run: () =>
			void load().then((writing) => {
				const found = writing.nameHere(view, kind);
				const { number } = view.state.doc.lineAt(view.state.selection.main.head);
				if (found && sheet.line.quantityOf(found.name)) sheet.depends = found.name;
				else if (kind === 'requirement') sheet.depends = `${active.cellId}:${number}`;
				else nothing();
			}),
		keepsFocus: true,
	});
	actions.push({
		name: 'Try another value of it',
		keys: 'Alt+Shift+V',
		run: () =>
			void load().then((writing) => {
				const found = writing.nameHere(view, kind);
				if (found) beginTrial(sheet, found.name);
				else nothing();
			}),
		keepsFocus: true,
	});
	if (!copy.editable) return actions;
	return [
		...actions,
		{
			name: 'Rename it everywhere',
			keys: 'Alt+Shift+N',
			run: () =>
				void load().then((writing) => {
					const found = writing.nameHere(view, kind);
					if (found) sheet.note.rename(found.name);
					else nothing();
				}),
			keepsFocus: true,
		},
		{
			name: 'Choose its unit and digits',
			keys: 'Alt+Shift+U',
			run: () =>
				void load().then((writing) => {
					const found = writing.nameHere(view, kind);
					if (found) askToSet(sheet, found.name, readoutOf(sheet, found.name));
					else nothing();
				}),
			keepsFocus: true,
		},
		{
			name: 'Mend this line',
			keys: 'Alt+Shift+M',
			run: () => {
				if (kind === 'text' || !mendHere(view))
					sheet.told = 'This line has nothing that mends at once.';
			},
			keepsFocus: true,
		},
	];
}

/** The readout beside which something about a quantity is asked: the one in the cell at hand, else its first. */
function readoutOf({ active }: Sheet, name: string): Element | null {
	const at = `[data-quantity="${CSS.escape(name)}"]`;
	const here = active && document.querySelector(`#cell-${active.cellId} ${at}`);
	return here ?? document.querySelector(`[data-cell] ${at}`);
}
