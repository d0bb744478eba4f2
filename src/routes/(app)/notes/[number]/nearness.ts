/** How far outside the window a cell counts as near, in windows. */
const reach = '150% 0px';

/** Tells elements when they come near the window. */
export class Nearness {
	readonly #told = new WeakMap<Element, () => void>();
	#observer: IntersectionObserver | undefined;

	/** Calls `tell` once the element is near; call what it returns when it goes. */
	watch(element: Element, tell: () => void): () => void {
		this.#observer ??= new IntersectionObserver((entries) => this.#see(entries), {
			rootMargin: reach,
		});
		this.#told.set(element, tell);
		this.#observer.observe(element);
		return () => this.#observer?.unobserve(element);
	}

	#see(entries: readonly IntersectionObserverEntry[]): void {
		for (const { target, isIntersecting } of entries) {
			if (!isIntersecting) continue;
			this.#observer?.unobserve(target);
			this.#told.get(target)?.();
		}
	}
}
