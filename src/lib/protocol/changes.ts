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

/**
 * Changes that make results of earlier ones, both as JSON has them. What is the same object in both is not looked
 * into, so that little is read where little changed.
 */
export function changesBetween(before: object, now: object): Changes {
	const parts: Changes['parts'] = {};
	for (const [name, part] of Object.entries(now)) {
		const change = changeOf(memberOf(before, name), part);
		if (change) parts[name] = change;
	}
	return { parts, gone: goneFrom(before, now) };
}

function changeOf(before: unknown, now: unknown): PartChange | undefined {
	if (before === now || now === undefined) return undefined;
	if (Array.isArray(before) && Array.isArray(now)) return listChange(before, now);
	if (!isRecord(before) || !isRecord(now)) return isSame(before, now) ? undefined : { value: now };
	const set = Object.entries(now).filter(
		([name, member]) => !isSame(memberOf(before, name), member),
	);
	const gone = goneFrom(before, now);
	return set.length + gone.length === 0 ? undefined : { set: Object.fromEntries(set), gone };
}

function listChange(
	before: readonly unknown[],
	now: readonly unknown[],
): ListChange<unknown> | undefined {
	if (before.length === now.length) {
		const list = now.flatMap((item, at): [number, unknown][] =>
			isSame(before[at], item) ? [] : [[at, item]],
		);
		return list.length === 0 ? undefined : { list };
	}
	const shorter = Math.min(before.length, now.length);
	let from = 0;
	while (from < shorter && isSame(before[from], now[from])) from += 1;
	let behind = 0;
	while (behind < shorter - from && isSame(before.at(-1 - behind), now.at(-1 - behind)))
		behind += 1;
	const removed = before.length - behind - from;
	return { from, removed, items: now.slice(from, now.length - behind) };
}

function isSame(one: unknown, other: unknown): boolean {
	return one === other || JSON.stringify(one) === JSON.stringify(other);
}

function isRecord(part: unknown): part is object {
	return typeof part === 'object' && part !== null && !Array.isArray(part);
}

/** A member as JSON has it: undefined where there is none. */
function memberOf(record: object, name: string): unknown {
	return Object.hasOwn(record, name) ? record[name as never] : undefined;
}

/** Names that only the earlier one has. */
function goneFrom(before: object, now: object): string[] {
	return Object.keys(before).filter(
		(name) => memberOf(now, name) === undefined && memberOf(before, name) !== undefined,
	);
}
