import type { Presence } from '$lib/protocol/presence';

/** Somebody else who has the note open. */
export interface Other {
	id: string;
	name: string;
	cellId: string | null;
}

/** The people other than this one in the states of a document's presence, each once, by name. */
export function othersIn(
	states: ReadonlyMap<number, Partial<Presence>>,
	personId: string,
): readonly Other[] {
	const others = new Map<string, Other>();
	for (const { user, cellId } of states.values()) {
		if (!user || user.id === personId) continue;
		// One page of theirs may be at a cell and another at none.
		const place = cellId ?? others.get(user.id)?.cellId ?? null;
		others.set(user.id, { id: user.id, name: user.name, cellId: place });
	}
	return [...others.values()].sort((a, b) => a.name.localeCompare(b.name));
}
