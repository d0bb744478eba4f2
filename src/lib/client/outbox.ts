import { mergeUpdates } from 'yjs';

/** Edits sent and not yet acknowledged at one time; what is made meanwhile goes together as the next. */
const window = 64;
/** Bytes up to which changes that wait are put together. */
const maxMergedBytes = 256 * 1024;
/** Bytes up to which an edit that was never sent takes in what is made after it. */
const maxGrownBytes = 16 * 1024;

/** Changes that travel together. Sent once, an edit keeps its id and bytes, so that sending it again is harmless. */
export interface UnsavedEdit {
	readonly id: string;
	readonly update: Uint8Array;
	/** How many changes it holds, as people count them. */
	readonly changes: number;
	/** Ids of the cells that it touches. */
	readonly cells: ReadonlySet<string>;
	/** When its first change was made, `performance.now()`. */
	readonly since: number;
}

interface Entry extends UnsavedEdit {
	underWay: boolean;
	/** The server may know it by this id. */
	known: boolean;
}

interface Loose {
	update: Uint8Array;
	cells: Iterable<string>;
	since: number;
}

/** Local edits until the server says that they are stored. Those not yet sent are put together. */
export class Outbox {
	readonly #edits = new Map<string, Entry>();
	#loose: Loose[] = [];
	#changes = 0;

	/** Changes that are not acknowledged. */
	get count(): number {
		return this.#changes;
	}

	/** Takes a change in, and the ids of the cells that it touches. */
	add(update: Uint8Array, cells: Iterable<string> = []): void {
		this.#loose.push({ update, cells, since: performance.now() });
		this.#changes += 1;
	}

	/** Takes an edit back that was made before this page was loaded. */
	restore(edit: UnsavedEdit): void {
		if (this.#edits.has(edit.id)) return;
		this.#edits.set(edit.id, { ...edit, underWay: false, known: true });
		this.#changes += edit.changes;
	}

	/** What to send now, in order; it counts as under way from here on. */
	take(): UnsavedEdit[] {
		const all = [...this.#edits.values()];
		let free = window - all.filter(({ underWay }) => underWay).length;
		const next: Entry[] = [];
		for (const edit of this.#waiting()) {
			if (free-- <= 0) break;
			edit.underWay = true;
			edit.known = true;
			next.push(edit);
		}
		return next;
	}

	/** Every edit that is not acknowledged, in order. */
	all(): UnsavedEdit[] {
		while (this.#loose.length > 0) this.#seal();
		return [...this.#edits.values()];
	}

	/** The connection broke: whatever was sent and not acknowledged is to be sent again. */
	reset(): void {
		for (const edit of this.#edits.values()) edit.underWay = false;
	}

	/** Forgets edits that are stored, or never will be. */
	settle(ids: readonly string[]): void {
		for (const id of ids) {
			this.#changes -= this.#edits.get(id)?.changes ?? 0;
			this.#edits.delete(id);
		}
	}

	/** Edits that are not under way; what is loose is put together when it is its turn. */
	*#waiting(): Generator<Entry> {
		for (const edit of this.#edits.values()) if (!edit.underWay) yield edit;
		while (this.#loose.length > 0) yield this.#seal();
	}

	#seal(): Entry {
		const last = [...this.#edits.values()].at(-1);
		const grown = last && !last.known && last.update.length < maxGrownBytes ? last : undefined;
		let bytes = grown?.update.length ?? 0;
		let end = 0;
		for (const { update } of this.#loose) {
			bytes += update.length;
			if (end > 0 && bytes > maxMergedBytes) break;
			end += 1;
		}
		const parts: Loose[] = [...(grown ? [grown] : []), ...this.#loose.splice(0, end)];
		if (grown) this.#edits.delete(grown.id);
		const [first] = parts;
		const edit: Entry = {
			id: newEditId(),
			update: parts.length > 1 ? mergeUpdates(parts.map(({ update }) => update)) : first!.update,
			changes: end + (grown?.changes ?? 0),
			cells: new Set(parts.flatMap(({ cells }) => [...cells])),
			since: first!.since,
			underWay: false,
			known: false,
		};
		this.#edits.set(edit.id, edit);
		return edit;
	}
}

/** 96 random bits, hexadecimal. */
function newEditId(): string {
	const bytes = crypto.getRandomValues(new Uint8Array(12));
	return Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('');
}
