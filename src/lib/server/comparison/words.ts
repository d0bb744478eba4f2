import type { Hunk, Part } from '$lib/schemas/comparison';
import { align, type Run } from './alignment';

/** Words and numbers whole, so that 39.0 becomes 38.3 and not another digit; spaces and signs alone. */
const pieces = /[\p{L}\p{M}\p{N}_]+(?:[.,]\p{N}+)*|\n|[^\S\n]+|./gsu;

/** What differs between two texts, word by word. The same and deleted parts joined are `from`, same and inserted `to`. */
export function partsOf(from: string, to: string, edits?: number): Part[] {
	if (from === to) return from === '' ? [] : [{ kind: 'same', text: from }];
	const [a, b] = [from.match(pieces) ?? [], to.match(pieces) ?? []];
	return whole(
		align(a, b, edits).map((run) => ({
			kind: run.kind,
			text: (run.kind === 'inserted' ? b.slice(run.to, run.to + run.length) : slice(a, run)).join(
				'',
			),
		})),
	);
}

/** Spaces between two changes belong to both of them: one change of some words reads better than one of each. */
function whole(parts: readonly Part[]): Part[] {
	const merged: Part[] = [];
	let [deleted, inserted] = ['', ''];
	const flush = () => {
		if (deleted !== '') merged.push({ kind: 'deleted', text: deleted });
		if (inserted !== '') merged.push({ kind: 'inserted', text: inserted });
		[deleted, inserted] = ['', ''];
	};
	parts.forEach(({ kind, text }, index) => {
		if (kind === 'deleted') deleted += text;
		else if (kind === 'inserted') inserted += text;
		else {
			const between = index + 1 < parts.length && deleted !== '' && inserted !== '';
			if (between && /^[^\S\n]+$/.test(text)) {
				deleted += text;
				inserted += text;
			} else {
				flush();
				merged.push({ kind, text });
			}
		}
	});
	flush();
	return merged;
}

/** Where two texts of several lines differ: the lines that do, word by word, with one line around them. */
export function hunksOf(from: string, to: string, edits?: number): Hunk[] {
	if (from === to) return [];
	const [a, b] = [from.split('\n'), to.split('\n')];
	const runs = align(a, b, edits);
	const hunks: Hunk[] = [];
	for (let index = 0; index < runs.length; index += 1) {
		const run = runs[index];
		if (!run || run.kind === 'same') continue;
		const next = runs[index + 1];
		const deleted = run.kind === 'deleted' ? slice(a, run) : [];
		const added = run.kind === 'inserted' ? run : next?.kind === 'inserted' ? next : undefined;
		const inserted = added ? b.slice(added.to, added.to + added.length) : [];
		if (added && added !== run) index += 1;
		const before = a.slice(Math.max(0, run.from - 1), run.from);
		const behind = a.slice(run.from + deleted.length, run.from + deleted.length + 1);
		hunks.push({
			fromLine: run.from - before.length + 1,
			toLine: run.to - before.length + 1,
			parts: partsOf(
				[...before, ...deleted, ...behind].join('\n'),
				[...before, ...inserted, ...behind].join('\n'),
				edits,
			),
		});
	}
	return hunks;
}

function slice(list: readonly string[], { from, length }: Run): string[] {
	return list.slice(from, from + length);
}
