import { diffArrays } from 'diff';

/** A run of members that both lists have, or that one of them has. Offsets are where it begins in each list. */
export interface Run {
	kind: 'same' | 'deleted' | 'inserted';
	from: number;
	to: number;
	length: number;
}

/** Edits up to which a shortest way from one list to another is looked for; the work grows with their square. */
const most = 600;

/**
 * What two lists have in common, in order, and what each has alone; what was deleted stands before what was inserted
 * in its place. Told the other way round it is the same with both exchanged. Lists that hardly have anything in common
 * count as wholly exchanged.
 */
export function align(a: readonly string[], b: readonly string[], edits: number = most): Run[] {
	// Of equally short ways the one found depends on where one starts: both directions must find the same.
	if (isBehind(a, b)) return inOrder(alignOrdered(b, a, edits).map(exchanged));
	return inOrder(alignOrdered(a, b, edits));
}

function alignOrdered(a: readonly string[], b: readonly string[], edits: number): Run[] {
	const found = diffArrays([...a], [...b], { maxEditLength: edits });
	if (!found) {
		return [
			{ kind: 'deleted', from: 0, to: 0, length: a.length },
			{ kind: 'inserted', from: a.length, to: 0, length: b.length },
		];
	}
	const runs: Run[] = [];
	let [from, to] = [0, 0];
	for (const { added, removed, value } of found) {
		const kind = added ? 'inserted' : removed ? 'deleted' : 'same';
		const length = value.length;
		runs.push({ kind, from, to, length });
		if (!added) from += length;
		if (!removed) to += length;
	}
	return runs;
}

function isBehind(a: readonly string[], b: readonly string[]): boolean {
	if (a.length !== b.length) return a.length > b.length;
	const at = a.findIndex((member, index) => member !== b[index]);
	return at >= 0 && (a[at] ?? '') > (b[at] ?? '');
}

function exchanged({ kind, from, to, length }: Run): Run {
	const other = { same: 'same', deleted: 'inserted', inserted: 'deleted' } as const;
	return { kind: other[kind], from: to, to: from, length };
}

/** Between two runs that both lists have, one deleted and one inserted at most, the deleted one first. */
function inOrder(runs: readonly Run[]): Run[] {
	const ordered: Run[] = [];
	let [from, to] = [0, 0];
	let [deleted, inserted] = [0, 0];
	const flush = () => {
		if (deleted > 0) ordered.push({ kind: 'deleted', from, to, length: deleted });
		from += deleted;
		if (inserted > 0) ordered.push({ kind: 'inserted', from, to, length: inserted });
		to += inserted;
		[deleted, inserted] = [0, 0];
	};
	for (const { kind, length } of runs) {
		if (length === 0) continue;
		if (kind === 'deleted') deleted += length;
		else if (kind === 'inserted') inserted += length;
		else {
			flush();
			const last = ordered.at(-1);
			if (last?.kind === 'same') last.length += length;
			else ordered.push({ kind, from, to, length });
			from += length;
			to += length;
		}
	}
	flush();
	return ordered;
}

/** Members that stand for each other: those both lists have, and in exchanged runs of one length the first with the first. */
export function pairs(runs: readonly Run[]): [from: number, to: number][] {
	return runs.flatMap((run, index) => {
		const next = runs[index + 1];
		const isExchange =
			run.kind === 'deleted' && next?.kind === 'inserted' && next.length === run.length;
		if (run.kind !== 'same' && !isExchange) return [];
		return Array.from({ length: run.length }, (_, k): [number, number] => [
			run.from + k,
			run.to + k,
		]);
	});
}
