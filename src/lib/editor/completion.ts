import {
	autocompletion,
	closeCompletion,
	completionKeymap,
	completionStatus,
	selectedCompletion,
	type Completion,
	type CompletionContext,
	type CompletionResult,
} from '@codemirror/autocomplete';
import { Prec, type Extension } from '@codemirror/state';
import { keymap, type EditorView, type KeyBinding } from '@codemirror/view';
import type { Vocabulary } from '$lib/calc/language/vocabulary';
import type { NoteCell } from '$lib/note/document';
import { cardOf } from './fact-card';
import { factOf, wordFact } from './facts';
import { noteContext } from './note-context';
import { suggestionsAt, type Suggestion } from './suggestions';
import { vocabulary, vocabularyNow } from './vocabulary';

/** Offers names, units, functions and constants while a formula or a quoted figure is written. */
export function completion(kind: NoteCell['kind']): Extension {
	return [
		Prec.highest(keymap.of(keys)),
		autocompletion({
			override: [(context) => complete(context, kind)],
			icons: false,
			defaultKeymap: false,
			// Names stand in the order of the sheet where nothing else tells them apart.
			compareCompletions: () => 0,
			addToOptions: [{ render: detailOf, position: 90 }],
		}),
	];
}

const keys: readonly KeyBinding[] = [
	// Before the key that takes what is offered.
	{ key: 'Enter', run: leaveWhole },
	...completionKeymap.filter(({ key }) => key !== 'Escape'),
	// What is only being looked for must not keep a person from leaving.
	{
		key: 'Escape',
		run: (view) => completionStatus(view.state) === 'active' && closeCompletion(view),
	},
];

/** What is offered is written already: Enter is a new line. */
function leaveWhole(view: EditorView): boolean {
	if (completionStatus(view.state) !== 'active') return false;
	const chosen = selectedCompletion(view.state) as Offered | null;
	if (!chosen) return false;
	const { head } = view.state.selection.main;
	const written = view.state.sliceDoc(Math.max(0, head - chosen.written.length), head);
	if (written === chosen.written) closeCompletion(view);
	return false;
}

interface Offered extends Completion {
	/** What it writes, without its ending. */
	written: string;
	suggestion: Suggestion;
}

/** Answers at once where it can: while an answer is awaited, Escape takes back the question and nothing else. */
function complete(
	context: CompletionContext,
	kind: NoteCell['kind'],
): CompletionResult | null | Promise<CompletionResult | null> {
	const now = vocabularyNow();
	const answer = answerWith(now.words, context, kind);
	if (!answer || now.complete) return answer;
	return vocabulary().then((words) => answerWith(words, context, kind));
}

function answerWith(
	words: Vocabulary,
	context: CompletionContext,
	kind: NoteCell['kind'],
): CompletionResult | null {
	const note = context.state.facet(noteContext);
	// Who has left the cell meanwhile wants no offers over the page.
	if (!note || context.view?.hasFocus === false) return null;
	const line = context.state.doc.lineAt(context.pos);
	const found = suggestionsAt({
		kind,
		line: line.text,
		before: line.text.slice(0, context.pos - line.from),
		cells: note.cells,
		evaluation: note.evaluation,
		words,
		asked: context.explicit,
	});
	if (!found) return null;
	const { cells, evaluation } = note;
	const options = found.list.map((suggestion): Offered => {
		const { name, label = name, ending = '', kind: type } = suggestion;
		return {
			label: name,
			...(label !== name && { displayLabel: label }),
			type,
			written: label,
			suggestion,
			boost: type === 'quantity' ? 2 : type === 'unit' ? 1 : 0,
			apply: (view, _completion, from, to) => write(view, label, ending, from, to),
			info: () => {
				const fact =
					type === 'unit'
						? undefined
						: (factOf(
								{ name, kind: 'name', parameter: false, from: 0, to: 0 },
								{ cells, evaluation, words },
							) ?? wordFact(name, words));
				return fact ? cardOf(fact) : null;
			},
		};
	});
	return { from: line.from + found.from, options, validFor: /^[\p{L}\p{N}_°%]*$/u };
}

function write(view: EditorView, label: string, ending: string, from: number, to: number): void {
	const behind = view.state.sliceDoc(to, to + 2);
	const bracket = ending === '(';
	const added = behind.startsWith(ending) ? '' : bracket ? '()' : ending;
	const cursor = from + label.length + ending.length;
	view.dispatch({
		changes: { from, to, insert: label + added },
		selection: { anchor: cursor },
		userEvent: 'input.complete',
		scrollIntoView: true,
	});
}

function detailOf(completion: Completion): HTMLElement {
	const dom = document.createElement('span');
	dom.className = 'cm-offered';
	dom.textContent = (completion as Offered).suggestion.detail;
	return dom;
}
