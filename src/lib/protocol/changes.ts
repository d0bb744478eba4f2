/** What became of a list: other items at their places, or others in place of a stretch. */
type ListChange<T> =
	{ list: [at: number, item: T][] } | { from: number; removed: number; items: T[] };

/** What became of one part of the results. */
type PartChange =
	ListChange<unknown> | { set: Record<string, unknown>; gone: string[] } | { value: unknown };

/** Results, told by what is different in them from the ones before. */
export interface Changes {
	/** By the part's name, as `lines`; what is not named stayed. */
	parts: Record<string, PartChange>;
	/** Names of parts that are no longer there. */
	gone: string[];
}

/** Results after changes. What did not change is the same object as before. */
export function applyChanges<R extends object>(before: R, { parts, gone }: Changes): R {
	const after = { ...before } as Record<string, unknown>;
	for (const name of gone) delete after[name];
	for (const [name, change] of Object.entries(parts)) after[name] = changed(after[name], change);
	return after as R;
}

function changed(before: unknown, change: PartChange): unknown {
	if ('value' in change) return change.value;
	if ('set' in change) {
		const after = { ...(before as Record<string, unknown>), ...change.set };
		for (const name of change.gone) delete after[name];
		return after;
	}
	const list = [...(before as unknown[])];
	if ('list' in change) for (const [at, item] of change.list) list[at] = item;
	else list.splice(change.from, change.removed, ...change.items);
	return list;
}
