import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { Blocker } from '$lib/schemas/review';
import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { thread } from '../db/schema/notes';
import type { CandidateRow } from './standing';

/** Why a candidate cannot be frozen now: open blocking threads, requirements that are not met, lines with errors. */
export async function of(connection: Connection, candidate: CandidateRow): Promise<Blocker[]> {
	const { content, results } = candidate;
	const threads = await connection
		.select({ cellId: thread.cellId, kind: thread.kind })
		.from(thread)
		.where(
			and(eq(thread.noteId, candidate.noteId), eq(thread.blocking, true), isNull(thread.closedAt)),
		)
		.orderBy(asc(thread.id));
	return [
		...threads.map(({ cellId, kind }) => {
			const place = terminalOf(content, cellId);
			return place === null
				? { text: `An open blocking ${kind} on a cell that this candidate does not have.` }
				: { text: `An open blocking ${kind} on cell ${place}.`, cellId };
		}),
		...results.requirements
			.filter((one) => one.verdict === 'not met')
			.map(({ cell, line }) => ({
				text: `Cell ${terminalOf(content, cell)}: ${lineOf(content, cell, line)} is not met.`,
				cellId: cell,
			})),
		...faults(content, results),
	];
}

/** One blocker per line that has an error. */
export function faults(content: NoteContent, results: Evaluation): Blocker[] {
	return results.errors.map(({ cell, line, message }) => ({
		text: `Cell ${terminalOf(content, cell)}, line ${line}: ${message}`,
		cellId: cell,
	}));
}

/** Number of a cell on its sheet, from 1. */
function terminalOf(content: NoteContent, cellId: string): number | null {
	const index = content.cells.findIndex((cell) => cell.id === cellId);
	return index < 0 ? null : index + 1;
}

function lineOf(content: NoteContent, cellId: string, line: number): string {
	const source = content.cells.find((cell) => cell.id === cellId)?.source ?? '';
	return (source.split('\n')[line - 1] ?? '').replace(/#.*/, '').trim();
}
