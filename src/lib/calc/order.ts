/** Names in an order in which each comes behind those it uses, and the circles that stand in the way. */
export interface Order {
	sorted: string[];
	/** For each name on a circle, the circle from that name back to it. */
	circles: Map<string, string[]>;
}

/** Sorts names by what they use (`uses` gives known names only). Iterative: a chain may be as long as a note. */
export function order(names: Iterable<string>, uses: (name: string) => readonly string[]): Order {
	const sorted: string[] = [];
	const index = new Map<string, number>();
	const low = new Map<string, number>();
	const open: string[] = [];
	const onStack = new Set<string>();
	const circles = new Map<string, string[]>();
	for (const root of names) {
		if (index.has(root)) continue;
		const frames: { name: string; next: number }[] = [{ name: root, next: 0 }];
		while (frames.length > 0) {
			const frame = frames.at(-1)!;
			const { name } = frame;
			if (frame.next === 0) {
				index.set(name, index.size);
				low.set(name, index.get(name)!);
				open.push(name);
				onStack.add(name);
			}
			const used = uses(name)[frame.next++];
			if (used !== undefined) {
				if (!index.has(used)) frames.push({ name: used, next: 0 });
				else if (onStack.has(used)) low.set(name, Math.min(low.get(name)!, index.get(used)!));
				continue;
			}
			frames.pop();
			const parent = frames.at(-1)?.name;
			if (parent !== undefined) low.set(parent, Math.min(low.get(parent)!, low.get(name)!));
			if (low.get(name) !== index.get(name)) continue;
			const component = new Set<string>();
			for (let member = open.pop(); member !== undefined; member = open.pop()) {
				onStack.delete(member);
				component.add(member);
				if (member === name) break;
			}
			// Members leave the stack last first; those found first are used by those found later.
			sorted.push(...component);
			if (component.size > 1 || uses(name).includes(name))
				for (const member of component) circles.set(member, circleOf(member, component, uses));
		}
	}
	return { sorted, circles };
}

/** Largest circle that is searched for the shortest way round; of larger ones the beginning is told. */
const mostSearched = 60;

/** Stands in a circle for the names that are left out. */
export const leftOut = '…';

function circleOf(
	start: string,
	within: Set<string>,
	uses: (name: string) => readonly string[],
): string[] {
	if (within.size <= mostSearched) return shortest(start, within, uses);
	const path = [start];
	while (path.length < 5) {
		const next = uses(path.at(-1) ?? start).find((used) => within.has(used));
		if (next === undefined) break;
		path.push(next);
		if (next === start) return path;
	}
	return [...path, leftOut, start];
}

/** The shortest way from a name back to itself within its circle. */
function shortest(
	start: string,
	within: Set<string>,
	uses: (name: string) => readonly string[],
): string[] {
	const from = new Map<string, string>();
	const queue = [start];
	for (const name of queue)
		for (const used of uses(name)) {
			if (used === start) {
				const path = [start];
				for (
					let step: string | undefined = name;
					step !== undefined && step !== start;
					step = from.get(step)
				)
					path.unshift(step);
				return [start, ...path];
			}
			if (within.has(used) && !from.has(used)) {
				from.set(used, name);
				queue.push(used);
			}
		}
	return [start, start];
}
