/** Lets the ground of a readout that changed fade once; nothing moves for people who asked for that. */
export function fadeOnce(dom: HTMLElement): void {
	if (matchMedia('(prefers-reduced-motion: reduce)').matches) return;
	const readout = dom.querySelector('.readout') ?? dom;
	readout.animate([{ backgroundColor: 'var(--rule-strong)' }, {}], {
		duration: 700,
		easing: 'ease-out',
	});
}
