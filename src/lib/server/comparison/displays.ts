import type { Display } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { DisplayChange } from '$lib/schemas/comparison';

/** Quantities whose readouts are set in another way, by the names of the later side. */
export function displayChanges(
	from: NoteContent,
	to: NoteContent,
	renamed: ReadonlyMap<string, string>,
): DisplayChange[] {
	const before = new Map(
		Object.entries(from.shown ?? {}).map(([name, one]) => [renamed.get(name) ?? name, told(one)]),
	);
	const after = new Map(Object.entries(to.shown ?? {}).map(([name, one]) => [name, told(one)]));
	return [...new Set([...after.keys(), ...before.keys()])]
		.map((name) => ({ name, from: before.get(name) ?? null, to: after.get(name) ?? null }))
		.filter((one) => one.from !== one.to);
}

function told({ unit, digits }: Display): string {
	const count = digits === undefined ? '' : `${digits} ${digits === 1 ? 'digit' : 'digits'}`;
	return [unit ?? '', count].filter((part) => part !== '').join(', ');
}
