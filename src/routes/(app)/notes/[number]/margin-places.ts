/** Free space between two groups of threads in the margin, in pixels. */
const gap = 14;

/**
 * Keeps the threads of the margin beside their cells without covering each other: a group that would lie under the
 * one before it is pushed down. On a narrow sheet the groups stand under their cells and nothing is pushed.
 */
export class MarginPlaces {
	#sheet: HTMLElement | undefined;
	#sizes: ResizeObserver | undefined;

	/** Attachment of the sheet. */
	readonly sheet = (element: HTMLElement): (() => void) => {
		this.#sheet = element;
		return this.#watch(element);
	};

	/** Attachment of a group of threads inside its cell. */
	readonly group = (element: HTMLElement): (() => void) => this.#watch(element);

	#watch(element: HTMLElement): () => void {
		this.#sizes ??= new ResizeObserver(() => this.#place());
		this.#sizes.observe(element);
		return () => {
			this.#sizes?.unobserve(element);
			this.#place();
		};
	}

	#place(): void {
		const sheet = this.#sheet;
		if (!sheet) return;
		let free = 0;
		for (const group of sheet.querySelectorAll<HTMLElement>('[data-margin]')) {
			const beside = getComputedStyle(group).position === 'absolute';
			const top = (group.offsetParent as HTMLElement | null)?.offsetTop ?? 0;
			const push = beside ? Math.max(0, free - top) : 0;
			group.style.setProperty('--push', `${push}px`);
			if (beside) free = top + push + group.offsetHeight + gap;
		}
		sheet.style.setProperty('--margin-end', `${free}px`);
	}
}
