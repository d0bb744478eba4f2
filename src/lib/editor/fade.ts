const durationMs = 700;

let changed: HTMLElement[] = [];

/**
 * Lets the ground of a readout that changed fade once; nothing moves for people who asked for that. One edit can
 * change every readout of a note, and fading must not delay the next figure: all begin together after the frame that
 * shows them, only those in the window, in few steps.
 */
export function fadeOnce(dom: HTMLElement): void {
	if (changed.push(dom) === 1) requestAnimationFrame(() => setTimeout(begin));
}

function begin(): void {
	const doms = changed;
	changed = [];
	if (matchMedia('(prefers-reduced-motion: reduce)').matches) return;
	// Everything is measured before anything changes, so that the page is laid out once.
	const seen = doms.filter((dom) => dom.isConnected && isInWindow(dom.getBoundingClientRect()));
	for (const dom of seen) {
		const readout = dom.querySelector('.readout') ?? dom;
		readout.animate([{ backgroundColor: 'var(--rule-strong)' }, {}], {
			duration: durationMs,
			easing: 'steps(5)',
		});
	}
}

function isInWindow({ top, bottom }: DOMRect): boolean {
	return bottom > 0 && top < innerHeight;
}
