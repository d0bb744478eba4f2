import type { Evaluation } from '$lib/calc/results';
import type { Saving } from '$lib/client/saving.svelte';
import type { NoteCell } from '$lib/note/document';
import type { Thread } from '$lib/schemas/comments';

interface Obstacle {
	text: string;
	cellId?: string;
	/** It stops proposing; otherwise it stops freezing only. */
	stops: boolean;
}

/** What stands between the sheet as it is and a frozen revision. The server decides; this tells it beforehand. */
export function obstaclesOf(
	cells: readonly NoteCell[],
	{ errors, requirements }: Evaluation,
	threads: readonly Thread[],
	saving: Saving,
): Obstacle[] {
	const terminal = (cellId: string) => cells.findIndex((cell) => cell.id === cellId) + 1;
	const lines = new Map(errors.map((fault) => [`${fault.cell} ${fault.line}`, fault]));
	return [
		...(saving.count > 0 ? [{ text: 'Changes on this page are not saved yet.', stops: true }] : []),
		...[...lines.values()].map(({ cell, line, message }) => ({
			text: `Cell ${terminal(cell)}, line ${line}: ${message}`,
			cellId: cell,
			stops: true,
		})),
		...requirements
			.filter(({ verdict }) => verdict !== 'met')
			.map(({ cell, line, verdict }) => ({
				text: `Cell ${terminal(cell)}, line ${line}: the requirement is ${verdict}.`,
				cellId: cell,
				stops: false,
			})),
		...threads
			.filter(({ blocking, closed }) => blocking && !closed)
			.map(({ cellId, kind }) => ({
				text: `Cell ${terminal(cellId)}: a blocking ${kind} is open.`,
				cellId,
				stops: false,
			})),
	];
}
