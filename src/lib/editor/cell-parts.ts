import type { Evaluation } from '$lib/calc/results';

type Part = object & { cell: string };

const known = new WeakMap<Evaluation, Map<string, Part[]>>();
const none: readonly Part[] = [];

/** Everything that results hold of a cell. What did not change since earlier results is the same object in both. */
export function partsOf(evaluation: Evaluation, cell: string): readonly Part[] {
	let byCell = known.get(evaluation);
	if (!byCell) {
		byCell = grouped(evaluation);
		known.set(evaluation, byCell);
	}
	return byCell.get(cell) ?? none;
}

function grouped(evaluation: Evaluation): Map<string, Part[]> {
	const byCell = new Map<string, Part[]>();
	for (const list of Object.values(evaluation)) {
		if (!Array.isArray(list)) continue;
		for (const part of list as Part[]) {
			const parts = byCell.get(part.cell);
			if (parts) parts.push(part);
			else byCell.set(part.cell, [part]);
		}
	}
	return byCell;
}

/** Whether two lists hold the same things in the same order. */
export function areSame(before: readonly unknown[] | undefined, now: readonly unknown[]): boolean {
	return before?.length === now.length && now.every((part, at) => part === before[at]);
}
