import type { Extension } from '@codemirror/state';
import { repositionTooltips, showTooltip, tooltips, ViewPlugin } from '@codemirror/view';

/**
 * Offers and explanations lie over the whole page. While one is open it follows its line wherever that goes:
 * a message above the sheet or another person's new line moves the line, and no event tells the editor so.
 */
export const overTheSheet = (): Extension => [
	// Within the page's main part, where those who go from part to part find them.
	tooltips({ parent: document.querySelector('main') ?? document.body, position: 'fixed' }),
	ViewPlugin.define((view) => {
		let frame: number | undefined;
		let place: string | undefined;

		function follow() {
			frame = undefined;
			if (!view.state.facet(showTooltip).some(Boolean)) return;
			const now = placeOf(view.contentDOM);
			if (now !== place) repositionTooltips(view);
			place = now;
			frame = requestAnimationFrame(follow);
		}
		return {
			update() {
				if (frame === undefined && view.state.facet(showTooltip).some(Boolean)) {
					frame = requestAnimationFrame(follow);
				}
			},
			destroy() {
				if (frame !== undefined) cancelAnimationFrame(frame);
			},
		};
	}),
];

function placeOf(element: Element): string {
	const { left, top } = element.getBoundingClientRect();
	return `${left} ${top}`;
}
