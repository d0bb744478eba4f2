const durationMs = 700;
/** Figures that go on changing, as while somebody types, have settled when they stood still this long. */
const settledMs = 350;

let changed = new Set<HTMLElement>();
let settling: ReturnType<typeof setTimeout> | undefined;

/**
 * Lets the ground of a readout that changed fade once; nothing moves for people who asked for that. One edit can
 * change every readout of a note, and fading must not delay the next figure: all begin together when the figures have
 * settled, only those in the window, in few steps.
 */
export function fadeOnce(dom: HTMLElement): void {
	changed.add(dom);
	clearTimeout(settling);
	settling = setTimeout(begin, settledMs);
}

function begin(): void {
	const doms = [...changed];
	changed = new Set();
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
