import type { Other } from '$lib/client/others';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';

/** Keys with which a page is scrolled where nothing is being written. */
const scrollKeys = new Set(['ArrowUp', 'ArrowDown', 'PageUp', 'PageDown', 'Home', 'End', ' ']);

/** Following another person: the page scrolls to where they are until this person moves by themselves. */
export class Following {
	readonly #copy: WorkingCopy;
	#id = $state<string>();
	readonly #person = $derived.by(() => this.#copy.people.find(({ id }) => id === this.#id));
	/** Their number on the sheet. */
	readonly #terminal = $derived.by(
		() => this.#copy.cells.findIndex(({ id }) => id === this.#person?.cellId) + 1,
	);
	#said = $state('');

	constructor(copy: WorkingCopy) {
		this.#copy = copy;
	}

	/** Who is followed. */
	get person(): Other | undefined {
		return this.#person;
	}
	/** What to tell people who listen. */
	get said(): string {
		if (!this.#person) return this.#said;
		const place = this.#terminal > 0 ? `, at cell ${this.#terminal}` : '';
		return `Following ${this.#person.name}${place}. Escape ends it.`;
	}

	start(id: string): void {
		this.#id = id;
		this.#said = '';
	}

	stop(): void {
		if (this.#id === undefined) return;
		this.#said = this.#person ? `No longer following ${this.#person.name}.` : 'They have left.';
		this.#id = undefined;
	}

	/** Scrolls to them now and whenever they move, until the returned function is called. */
	watch(): () => void {
		let frame = 0;
		const look = () => {
			cancelAnimationFrame(frame);
			// The editors draw the moved cursor first.
			frame = requestAnimationFrame(() => this.#person && scrollTo(this.#person));
		};
		const { awareness } = this.#copy;
		const ending = new AbortController();
		const { signal } = ending;
		const stop = () => this.stop();
		awareness.on('change', look);
		window.addEventListener('wheel', stop, { signal, passive: true });
		window.addEventListener('touchmove', stop, { signal, passive: true });
		window.addEventListener('pointerdown', (event) => isScrollbar(event) && stop(), { signal });
		window.addEventListener('focusin', (event) => isWriting(event.target) && stop(), { signal });
		window.addEventListener('keydown', (event) => endsBy(event) && stop(), { signal });
		look();
		return () => {
			cancelAnimationFrame(frame);
			awareness.off('change', look);
			ending.abort();
		};
	}
}

function endsBy({ key, target }: KeyboardEvent): boolean {
	if (key === 'Escape') return !document.querySelector(':popover-open, dialog[open]');
	return scrollKeys.has(key) && !(target instanceof Element && target.closest('button, a'));
}

function isWriting(target: EventTarget | null): boolean {
	return (
		target instanceof Element && target.closest('[contenteditable=true], input, textarea') !== null
	);
}

function isScrollbar({ target }: Event): boolean {
	return target === document.documentElement;
}

function scrollTo({ cellId, name }: Other): void {
	const cell = cellId === null ? undefined : document.getElementById(`cell-${cellId}`);
	if (!cell) return;
	const carets = Array.from(cell.querySelectorAll('.cm-ySelectionCaret'));
	const caret = carets.find((one) => one.querySelector('.cm-ySelectionInfo')?.textContent === name);
	const { top } = (caret ?? cell).getBoundingClientRect();
	if (top > 60 && top < window.innerHeight * 0.7) return;
	window.scrollBy({ top: top - window.innerHeight / 3, behavior: 'instant' });
}
