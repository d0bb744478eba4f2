import type { Cell } from './results';

/** What a person typed into a cell; '' for those that hold no text. */
export function sourceOf(cell: Cell): string {
	return 'source' in cell ? cell.source : '';
}
