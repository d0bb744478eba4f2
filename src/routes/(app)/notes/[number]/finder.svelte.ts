import { find, type Question } from '$lib/editor/find';
import type { Place } from '$lib/editor/note-context';
import { replacePlaces } from '$lib/note/replace-places';
import type { Sheet } from './sheet.svelte';

interface Hit {
	from: number;
	to: number;
	current: boolean;
}

const none: readonly Hit[] = [];

/** Finding and replacing in all cells of the sheet. */
export class Finder implements Question {
	text = $state('');
	replacement = $state('');
	matchCase = $state(false);
	wholeName = $state(false);
	readonly #sheet: Sheet;
	#index = $state(0);
	readonly #open = $derived.by(() => this.#sheet.tool?.kind === 'find');
	readonly #places = $derived.by(() => (this.#open ? find(this.#sheet.copy.cells, this) : []));
	readonly #hits = $derived.by(() => {
		const hits = new Map<string, Hit[]>();
		this.#places.forEach(({ cellId, from, to }, index) => {
			const list = hits.get(cellId) ?? [];
			list.push({ from, to, current: index === this.index });
			hits.set(cellId, list);
		});
		return hits;
	});

	constructor(sheet: Sheet) {
		this.#sheet = sheet;
	}

	get count(): number {
		return this.#places.length;
	}

	/** Which of the places the person is at, from 0. */
	get index(): number {
		return Math.min(this.#index, Math.max(0, this.#places.length - 1));
	}

	/** The place the person is at. */
	get current(): Place | undefined {
		return this.#places[this.index];
	}

	/** What was found in a cell; always the same list where that is nothing. */
	of(cellId: string): readonly Hit[] {
		return this.#hits.get(cellId) ?? none;
	}

	/** Opens the tool; what is marked in the editor is looked for. */
	open(): void {
		const { view } = this.#sheet.active ?? {};
		const { from, to } = view?.state.selection.main ?? { from: 0, to: 0 };
		const marked = view?.state.sliceDoc(from, to) ?? '';
		if (marked !== '' && !marked.includes('\n')) this.text = marked;
		this.#index = 0;
		this.#sheet.tool = { kind: 'find' };
	}

	/** Asks another question, which begins with its first place. */
	ask(question: Partial<Question>): void {
		Object.assign(this, question);
		this.#index = 0;
		this.show();
	}

	/** Goes to the next place (1) or the one before (-1), round the sheet. */
	step(direction: -1 | 1): void {
		const { count } = this;
		if (count === 0) return;
		this.#index = (this.index + direction + count) % count;
		this.show();
	}

	/** Shows the present place and leaves the focus where it is. */
	show(): void {
		if (this.current) this.#sheet.go(this.current, false);
	}

	/** Replaces the present place and goes to the next. */
	replace(): void {
		const { current } = this;
		if (!current) return;
		this.#write([current]);
		const written = current.from + this.replacement.length;
		// What was just written may hold the text again: `R1` in `R12`.
		while (this.current?.cellId === current.cellId && this.current.from < written) {
			if (this.#index >= this.count - 1) break;
			this.#index += 1;
		}
		this.show();
	}

	/** Replaces all places as one step. */
	replaceAll(): void {
		const count = this.#write(this.#places);
		this.#sheet.told = count === 1 ? '1 place replaced.' : `${count} places replaced.`;
	}

	#write(places: readonly Place[]): number {
		const { text, replacement } = this;
		const isText = (found: string) => found.toLowerCase() === text.toLowerCase();
		return this.#sheet.copy.change((doc) => replacePlaces(doc, places, replacement, isText)) ?? 0;
	}
}
