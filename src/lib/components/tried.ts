import type { MovedQuantity, MovedRequirement } from '$lib/calc/moved';

/** What a trial makes of the figures on the sheet; undefined of those that it leaves as they are. */
export interface Tried {
	ofQuantity(name: string | undefined): MovedQuantity | undefined;
	ofRequirement(cell: string, line: number): MovedRequirement | undefined;
}
