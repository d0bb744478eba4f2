import type { Range, Text } from '@codemirror/state';
import { Decoration, type DecorationSet, type EditorView } from '@codemirror/view';
import type { Component } from 'svelte';
import type { MovedQuantity, MovedRequirement } from '$lib/calc/moved';
import type { Fault, Readout as Shown, Requirement, WorkedLine } from '$lib/calc/results';
import FaultNote from '$lib/components/FaultNote.svelte';
import LineValue from '$lib/components/LineValue.svelte';
import type { Opener } from '$lib/components/opener';
import type { OpenLine } from '$lib/client/open-line.svelte';
import Verdict from '$lib/components/Verdict.svelte';
import { fadeOnce } from './fade';
import { MountedWidget } from './mounted-widget';

/** A result of a cell at its place in the text. */
export type Result =
	| { kind: 'readout'; at: number; widget: ReadoutWidget }
	| { kind: 'verdict'; at: number; widget: VerdictWidget }
	| { kind: 'detail'; at: number; widget: DetailWidget }
	| {
			kind: 'fault';
			at: number;
			to: number;
			fault: Fault;
			/** What its replacement takes the place of. */
			mendAt: { from: number; to: number };
	  };

export type ReadoutWidget = ReturnType<typeof readout>;
export type VerdictWidget = ReturnType<typeof verdict>;
export type DetailWidget = ReturnType<typeof detail>;
/** What stands behind a line. */
export type Behind = Component<{ line: OpenLine }>;
type Mend = (view: EditorView, fault: Fault) => void;

/** Decorations of all results; lines without a readout or verdict are marked as silent. */
export function decorate(doc: Text, list: readonly Result[], mend: Mend): DecorationSet {
	const ranges: Range<Decoration>[] = [];
	const spoken = new Set<number>();
	for (const result of list) {
		if (result.at > doc.length) continue;
		const line = doc.lineAt(result.at);
		if (result.kind === 'fault') {
			ranges.push(...faultRanges(result, line.from, line.to, mend));
		} else if (result.kind === 'detail') {
			ranges.push(
				Decoration.widget({ widget: result.widget, block: true, side: 2 }).range(line.to),
			);
		} else if (!spoken.has(line.number)) {
			spoken.add(line.number);
			ranges.push(Decoration.widget({ widget: result.widget, side: 1 }).range(line.to));
		}
	}
	for (let number = 1; number <= doc.lines; number++) {
		if (!spoken.has(number)) ranges.push(silent.range(doc.line(number).from));
	}
	return Decoration.set(ranges, true);
}

const silent = Decoration.line({ class: 'line-silent' });
const underline = Decoration.mark({ class: 'fault-mark' });

export function readout(
	{ name, line }: WorkedLine,
	shown: Shown,
	remarks: readonly string[] | undefined,
	opener: Opener | undefined,
	moved: MovedQuantity | undefined,
) {
	return new MountedWidget({
		component: LineValue,
		props: () => ({ readout: shown, quantity: name, remarks, opener, moved }),
		key: name ?? `line ${line}`,
		text: JSON.stringify([shown, remarks, moved]),
		className: 'line-readout',
		ownEvents: true,
		// What a trial moves is no change of the note.
		...(moved === undefined && { onchange: fadeOnce }),
	});
}

/** What stands behind the open line, under it. The component follows the results by itself. */
export function detail(name: string, component: Behind, line: OpenLine) {
	return new MountedWidget({
		component,
		props: () => ({ line }),
		key: `detail of ${name}`,
		text: name,
		block: true,
		ownEvents: true,
	});
}

export function verdict(requirement: Requirement, moved: MovedRequirement | undefined) {
	return new MountedWidget({
		component: Verdict,
		props: () => ({ requirement, moved }),
		key: `line ${requirement.line}`,
		text: JSON.stringify([requirement, moved]),
	});
}

function* faultRanges(
	{ fault, at, to }: Extract<Result, { kind: 'fault' }>,
	lineFrom: number,
	lineTo: number,
	mend: Mend,
): Generator<Range<Decoration>> {
	// A fault of no width is shown at the character before it, or behind it at the line's start.
	const from = at === to && at > lineFrom && at === lineTo ? at - 1 : at;
	const end = Math.min(lineTo, from === to ? to + 1 : to);
	if (end > from) yield underline.range(from, end);
	const widget = new MountedWidget({
		component: FaultNote,
		props: (view: EditorView) => ({ fault, onmend: () => mend(view, fault) }),
		key: `${fault.code} ${fault.line}`,
		text: JSON.stringify(fault),
		block: true,
		ownEvents: true,
	});
	yield Decoration.widget({ widget, block: true, side: 1 }).range(lineTo);
}
