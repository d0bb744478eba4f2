import type { NoteCell, NoteContent } from '$lib/note/document';
import type { CellChange, TextChange } from '$lib/schemas/comparison';
import { align } from './alignment';
import { hunksOf } from './words';

/** Cells that changed their text, beyond which texts are compared more coarsely. */
const many = 100;

/** Cells that came, went, moved or became of another kind, in the order of the later sheet; those that went stand last. */
export function cellChanges(from: NoteContent, to: NoteContent): CellChange[] {
	const [before, after] = [placed(from), placed(to)];
	const stayed = stayedOf(from, to);
	const changes = to.cells.flatMap(({ id }) => {
		const [old, now] = [before.get(id), after.get(id)];
		if (!old) return [changeOf('added', undefined, now)];
		return [
			...(stayed.has(id) ? [] : [changeOf('moved', old, now)]),
			...(old.cell.kind === now?.cell.kind ? [] : [changeOf('kind', old, now)]),
		];
	});
	const gone = from.cells
		.filter(({ id }) => !after.has(id))
		.map(({ id }) => changeOf('removed', before.get(id), undefined));
	return [...changes, ...gone];
}

/** Cells that kept their place among the others that both sides have. */
function stayedOf(from: NoteContent, to: NoteContent): Set<string> {
	const ids = (one: NoteContent, other: NoteContent) => {
		const there = new Set(other.cells.map(({ id }) => id));
		return one.cells.map(({ id }) => id).filter((id) => there.has(id));
	};
	const a = ids(from, to);
	return new Set(
		align(a, ids(to, from), 1500).flatMap((run) =>
			run.kind === 'same' ? a.slice(run.from, run.from + run.length) : [],
		),
	);
}

interface Placed {
	cell: NoteCell;
	terminal: number;
}

function placed({ cells }: NoteContent): Map<string, Placed> {
	return new Map(cells.map((cell, index) => [cell.id, { cell, terminal: index + 1 }]));
}

function changeOf(
	change: CellChange['change'],
	from: Placed | undefined,
	to: Placed | undefined,
): CellChange {
	const cell = (to ?? from)?.cell;
	return {
		cell: cell?.id ?? '',
		change,
		fromTerminal: from?.terminal ?? null,
		toTerminal: to?.terminal ?? null,
		fromKind: from?.cell.kind ?? null,
		toKind: to?.cell.kind ?? null,
		words: beginningOf(cell?.source ?? ''),
	};
}

function beginningOf(source: string): string {
	const line = source.split('\n').find((text) => text.trim() !== '') ?? '';
	const words = line.replace(/^#+\s*/, '').trim();
	return words.length > 80 ? `${words.slice(0, 79).trimEnd()}…` : words;
}

/** Cells whose text differs, in the order of the later sheet; those that went stand last. */
export function textChanges(from: NoteContent, to: NoteContent): TextChange[] {
	const [before, after] = [placed(from), placed(to)];
	const ids = [...after.keys(), ...[...before.keys()].filter((id) => !after.has(id))];
	const changed = ids.filter(
		(id) => (before.get(id)?.cell.source ?? '') !== (after.get(id)?.cell.source ?? ''),
	);
	const edits = changed.length > many ? 60 : undefined;
	return changed.map((id) => {
		const [old, now] = [before.get(id), after.get(id)];
		return {
			cell: id,
			kind: (now ?? old)?.cell.kind ?? 'text',
			fromTerminal: old?.terminal ?? null,
			toTerminal: now?.terminal ?? null,
			hunks: hunksOf(old?.cell.source ?? '', now?.cell.source ?? '', edits),
		};
	});
}
