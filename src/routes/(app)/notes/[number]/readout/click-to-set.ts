import type { Attachment } from 'svelte/attachments';
import type { Sheet } from '../sheet.svelte';

/** Attachment of the sheet: a click on a readout of a quantity asks for its unit and digits. */
export function clickToSet(sheet: Sheet): Attachment<HTMLElement> {
	return (element) => {
		const ask = ({ target }: MouseEvent) => {
			if (!(target instanceof Element) || !sheet.copy.editable) return;
			const readout = target.closest<HTMLElement>('.readout[data-quantity]');
			if (!readout || getSelection()?.isCollapsed === false) return;
			askToSet(sheet, readout.dataset.quantity ?? '', readout);
		};
		element.addEventListener('click', ask);
		return () => element.removeEventListener('click', ask);
	};
}

/** Asks for the unit and digits of a quantity's readouts, beside an element of the page. */
export function askToSet(sheet: Sheet, name: string, at: Element | null): void {
	if (!Object.hasOwn(sheet.copy.evaluation.quantities, name)) {
		sheet.told = 'There is no quantity with a value here.';
		return;
	}
	sheet.setting = { name, at: at ?? document.body };
}
