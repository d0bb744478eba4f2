import type { Evaluation, Verdict } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { Blocker, Policy } from '$lib/schemas/review';
import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { thread } from '../db/schema/notes';
import type { CandidateRow } from './standing';

/** Why a candidate cannot be frozen now: open threads, requirements that are not met, lines with errors. */
export async function of(
	connection: Connection,
	candidate: CandidateRow,
	policy: Policy,
): Promise<Blocker[]> {
	const { content, results } = candidate;
	const threads = await connection
		.select({ cellId: thread.cellId, kind: thread.kind, blocking: thread.blocking })
		.from(thread)
		.where(
			and(
				eq(thread.noteId, candidate.noteId),
				isNull(thread.closedAt),
				policy.commentsBlock ? undefined : eq(thread.blocking, true),
			),
		)
		.orderBy(asc(thread.id));
	return [
		...threads.map(({ cellId, kind, blocking }) => {
			const place = terminalOf(content, cellId);
			const what = blocking ? `An open blocking ${kind}` : `An open ${kind}`;
			return place === null
				? { text: `${what} on a cell that this candidate does not have.` }
				: { text: `${what} on cell ${place}.`, cellId };
		}),
		...requirements(content, results, policy),
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

function requirements(content: NoteContent, results: Evaluation, policy: Policy): Blocker[] {
	const blocking: Verdict[] = policy.undecidedBlocks ? ['not met', 'undecided'] : ['not met'];
	return results.requirements
		.filter(({ verdict }) => blocking.includes(verdict))
		.map(({ cell, line, verdict }) => {
			const requirement = lineOf(content, cell, line);
			return {
				text: `Cell ${terminalOf(content, cell)}: ${requirement} is ${verdict}.`,
				cellId: cell,
				...(policy.waivers && { waivable: { field: `${cell}:${line}`, requirement } }),
			};
		});
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
