import {
	StateEffect,
	StateField,
	type ChangeDesc,
	type Extension,
	type Text,
} from '@codemirror/state';
import { EditorView, type DecorationSet } from '@codemirror/view';
import type { Evaluation, Fault, Requirement, WorkedLine } from '$lib/calc/results';
import { splitLine } from '$lib/components/lines';
import type { OpenLine } from '$lib/client/open-line.svelte';
import { areSame, partsOf } from './cell-parts';
import { noteContext } from './note-context';
import { remarksOf } from '$lib/components/remarks';
import type { Tried } from '$lib/components/tried';
import {
	decorate,
	detail,
	readout,
	verdict,
	type Behind,
	type DetailWidget,
	type ReadoutWidget,
	type Result,
	type VerdictWidget,
} from './result-decorations';

const arrived = StateEffect.define<Result[]>();

/** The line that is open, what stands under it as soon as that is loaded, and a trial that moves figures. */
interface Open {
	line: OpenLine;
	Behind: Behind | undefined;
	tried: Tried;
}

/** Shows the results of a cell in its editor. */
export function showResults(
	view: EditorView,
	cell: string,
	evaluation: Evaluation,
	open: Open,
): void {
	// Most keys change figures of few cells.
	const parts = shownOf(cell, evaluation, open);
	const last = shown.get(view);
	if (last?.doc === view.state.doc && areSame(last.parts, parts)) return;
	shown.set(view, { doc: view.state.doc, parts });
	const list = placed(view.state.doc, cell, evaluation, open);
	const before = view.state.field(field).list;
	const next = list.map(keepingWidget(before));
	// An update of an editor lays the page out; most edits change figures, not where they stand.
	if (!standAlike(before, next)) view.dispatch({ effects: arrived.of(next) });
}

/** What editors show, and of which text; while all of it is the same nothing is placed anew. */
const shown = new WeakMap<EditorView, { doc: Text; parts: readonly unknown[] }>();

/** All that the results of a cell are shown by. */
function shownOf(cell: string, evaluation: Evaluation, { line, Behind, tried }: Open): unknown[] {
	const parts = partsOf(evaluation, cell).flatMap((part: Partial<WorkedLine & Requirement>) => [
		part,
		remarksOf(evaluation, part.name),
		tried.ofQuantity(part.name),
		tried.ofRequirement(cell, part.line ?? 0),
	]);
	return [line.opened, Behind, ...parts];
}

/** Gives a result the widget that shows its line already, with the new figure: one line has one widget for good. */
function keepingWidget(before: readonly Result[]): (result: Result) => Result {
	const readouts = new Map<string, ReadoutWidget>();
	const verdicts = new Map<string, VerdictWidget>();
	const details = new Map<string, DetailWidget>();
	for (const result of before) {
		if (result.kind === 'readout') readouts.set(result.widget.choices.key, result.widget);
		if (result.kind === 'verdict') verdicts.set(result.widget.choices.key, result.widget);
		if (result.kind === 'detail') details.set(result.widget.choices.key, result.widget);
	}
	return (result) => {
		if (result.kind === 'readout') return { ...result, widget: kept(readouts, result.widget) };
		if (result.kind === 'verdict') return { ...result, widget: kept(verdicts, result.widget) };
		if (result.kind === 'detail') return { ...result, widget: kept(details, result.widget) };
		return result;
	};
}

function kept<Widget extends { choices: { key: string }; become(next: Widget): void }>(
	known: Map<string, Widget>,
	widget: Widget,
): Widget {
	const { key } = widget.choices;
	const before = known.get(key);
	if (!before) return widget;
	known.delete(key);
	before.become(widget);
	return before;
}

/** Whether all results stand where they stood, in the same widgets, and no fault changed. */
function standAlike(before: readonly Result[], next: readonly Result[]): boolean {
	const alike = (a: Result, b: Result | undefined) => {
		if (a.kind === 'fault' || b?.kind === 'fault') return JSON.stringify(a) === JSON.stringify(b);
		return a.at === b?.at && a.widget === b.widget;
	};
	return before.length === next.length && before.every((it, index) => alike(it, next[index]));
}

const field = StateField.define<{ list: Result[]; decorations: DecorationSet }>({
	create: ({ doc }) => ({ list: [], decorations: decorate(doc, [], mend) }),
	update(value, transaction) {
		const news = transaction.effects.filter((effect) => effect.is(arrived)).at(-1)?.value;
		if (!news && !transaction.docChanged) return value;
		const list = news ?? value.list.map((result) => moved(result, transaction.changes));
		return { list, decorations: decorate(transaction.newDoc, list, mend) };
	},
	provide: (self) => EditorView.decorations.from(self, (value) => value.decorations),
});

/**
 * Readouts, verdicts and faults at their lines. They move with the text until the next results arrive, so that they
 * stay beside their lines while the server computes.
 */
export function results(): Extension {
	return field;
}

/** Puts a fault's replacement where the fault stands now. */
function mend(view: EditorView, fault: Fault): void {
	// A note under a line stays while its fault does; newer results hold an equal fault, not the same.
	const text = JSON.stringify(fault);
	const place = view.state
		.field(field)
		.list.find((result) => result.kind === 'fault' && JSON.stringify(result.fault) === text);
	if (place?.kind !== 'fault' || view.state.readOnly) return;
	const note = view.state.facet(noteContext);
	if (fault.rename && note) return note.rename(fault.rename.from, fault.rename.to);
	if (fault.replacement === undefined) return;
	const { from, to } = place.mendAt;
	view.dispatch({
		changes: { from, to, insert: fault.replacement },
		selection: { anchor: from + fault.replacement.length },
		userEvent: 'input.mend',
	});
	view.focus();
}

/** Mends the first fault of the cursor's line that can be; gives whether there was one. */
export function mendHere(view: EditorView): boolean {
	const results = view.state.field(field, false)?.list ?? [];
	const line = view.state.doc.lineAt(view.state.selection.main.head);
	for (const result of results) {
		if (result.kind !== 'fault' || !isMendable(result.fault)) continue;
		if (result.at < line.from || result.at > line.to) continue;
		mend(view, result.fault);
		return true;
	}
	return false;
}

function isMendable({ replacement, rename }: Fault): boolean {
	return replacement !== undefined || rename !== undefined;
}

function moved(result: Result, changes: ChangeDesc): Result {
	const at = changes.mapPos(result.at, 1);
	if (result.kind !== 'fault') return { ...result, at };
	const from = changes.mapPos(result.mendAt.from, 1);
	const mendAt = { from, to: Math.max(from, changes.mapPos(result.mendAt.to, -1)) };
	return { ...result, at, to: Math.max(at, changes.mapPos(result.to, -1)), mendAt };
}

function placed(
	doc: Text,
	cell: string,
	evaluation: Evaluation,
	{ line: opener, Behind, tried }: Open,
): Result[] {
	const list: Result[] = [];
	const startOf = startsIn(doc);
	for (const line of evaluation.lines) {
		if (line.cell !== cell) continue;
		const at = startOf(line.line, line.name);
		if (at === undefined) continue;
		// It stays open while its line has no value, as while somebody types further up.
		if (Behind && line.name !== undefined && line.name === opener.opened)
			list.push({ kind: 'detail', at, widget: detail(line.name, Behind, opener) });
		if (line.readout) {
			const remarks = remarksOf(evaluation, line.name);
			list.push({
				kind: 'readout',
				at,
				widget: readout(line, line.readout, remarks, opener, tried.ofQuantity(line.name)),
			});
		}
	}
	for (const requirement of evaluation.requirements) {
		if (requirement.cell !== cell) continue;
		const at = startOf(requirement.line);
		if (at !== undefined) {
			list.push({
				kind: 'verdict',
				at,
				widget: verdict(requirement, tried.ofRequirement(cell, requirement.line)),
			});
		}
	}
	for (const fault of evaluation.errors) {
		if (fault.cell !== cell) continue;
		const start = startOf(fault.line);
		if (start === undefined) continue;
		const end = doc.lineAt(start).to;
		const within = ({ from, to }: { from: number; to: number }) => {
			const first = Math.min(start + from, end);
			return { from: first, to: Math.min(Math.max(start + to, first), end) };
		};
		const { from: at, to } = within(fault);
		list.push({ kind: 'fault', at, to, fault, mendAt: within(fault.replaces ?? fault) });
	}
	return list;
}

/** Finds where a line starts. Results may be a moment older than the text: a defined name is looked up where it went. */
function startsIn(doc: Text): (number: number, name?: string) => number | undefined {
	let byName: Map<string, number> | undefined;
	return (number, name) => {
		const line = number <= doc.lines ? doc.line(number) : undefined;
		if (name === undefined || (line && splitLine(line.text).name === name)) return line?.from;
		return (byName ??= namesIn(doc)).get(name);
	};
}

/** Where each name is defined, the first place where there are several. */
function namesIn(doc: Text): Map<string, number> {
	const found = new Map<string, number>();
	for (let number = 1; number <= doc.lines; number++) {
		const { text, from } = doc.line(number);
		const { name } = splitLine(text);
		if (name !== undefined && !found.has(name)) found.set(name, from);
	}
	return found;
}
