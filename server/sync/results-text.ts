/** A part of the results: its own JSON, or that of each of its members. */
type Part = string | readonly string[] | ReadonlyMap<string, string>;

/** The JSON of results, cut so that what changed can be told without the rest. */
export class ResultsText {
	readonly #parts: ReadonlyMap<string, Part>;

	constructor(results: object) {
		const stated = Object.entries(results).filter(([, value]) => value !== undefined);
		this.#parts = new Map(stated.map(([name, value]) => [name, cut(value)]));
	}

	/** All of it. */
	whole(): string {
		return joined(this.#parts, (part) =>
			typeof part === 'string' ? part : isList(part) ? listed(part) : joined(part),
		);
	}

	/** JSON of `Changes` that make these results of earlier ones. */
	since(before: ResultsText): string {
		const parts = new Map<string, string>();
		for (const [name, part] of this.#parts) {
			const change = changeOf(before.#parts.get(name), part);
			if (change !== undefined) parts.set(name, change);
		}
		const gone = [...before.#parts.keys()].filter((name) => !this.#parts.has(name));
		return `{"parts":${joined(parts)},"gone":${JSON.stringify(gone)}}`;
	}
}

function cut(value: unknown): Part {
	if (Array.isArray(value)) return value.map((item) => JSON.stringify(item));
	if (value === null || typeof value !== 'object') return JSON.stringify(value);
	const members = Object.entries(value).filter(([, member]) => member !== undefined);
	return new Map(members.map(([name, member]) => [name, JSON.stringify(member)]));
}

/** JSON of what became of a part, as `Changes` has it; undefined where nothing changed. */
function changeOf(before: Part | undefined, now: Part): string | undefined {
	if (typeof now === 'string') return before === now ? undefined : valueIs(now);
	if (now instanceof Map) {
		if (!(before instanceof Map)) return valueIs(joined(now));
		const set = new Map([...now].filter(([name, text]) => before.get(name) !== text));
		const gone = [...before.keys()].filter((name) => !now.has(name));
		if (set.size === 0 && gone.length === 0) return undefined;
		return `{"set":${joined(set)},"gone":${JSON.stringify(gone)}}`;
	}
	if (!isList(before)) return valueIs(listed(now as readonly string[]));
	return listChange(before, now as readonly string[]);
}

function listChange(before: readonly string[], now: readonly string[]): string | undefined {
	if (before.length === now.length) {
		const other = now.flatMap((item, at) => (item === before[at] ? [] : [`[${at},${item}]`]));
		return other.length === 0 ? undefined : `{"list":${listed(other)}}`;
	}
	const shorter = Math.min(before.length, now.length);
	let from = 0;
	while (from < shorter && before[from] === now[from]) from += 1;
	let behind = 0;
	while (behind < shorter - from && before.at(-1 - behind) === now.at(-1 - behind)) behind += 1;
	const removed = before.length - behind - from;
	return `{"from":${from},"removed":${removed},"items":${listed(now.slice(from, now.length - behind))}}`;
}

function isList(part: Part | undefined): part is readonly string[] {
	return Array.isArray(part);
}

function valueIs(text: string): string {
	return `{"value":${text}}`;
}

function listed(items: readonly string[]): string {
	return `[${items.join(',')}]`;
}

function joined<T>(
	members: ReadonlyMap<string, T>,
	text = (member: T) => member as string,
): string {
	return `{${Array.from(members, ([name, member]) => `${JSON.stringify(name)}:${text(member)}`).join(',')}}`;
}
