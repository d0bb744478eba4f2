import type { Fault, FaultCode } from './results';

export interface Mend {
	mend?: string;
	replacement?: string;
	/** What the replacement takes the place of, where that is not the place of the fault. */
	replaces?: { from: number; to: number };
	/** The quantity that wants another name, and that name. */
	rename?: { from: string; to: string };
	/** Unit symbol the fault is about: where the note has a quantity of that name, that one is meant. */
	unitName?: string;
}

/** A fault in one line, thrown by the step that finds it. Columns are those of the line. */
export class Trouble extends Error {
	constructor(
		readonly code: FaultCode,
		readonly at: { from: number; to: number },
		message: string,
		readonly how: Mend = {},
	) {
		super(message);
		this.name = 'Trouble';
	}
}

/** The parts of a fault that say how to mend it. `column` is where the line's columns begin. */
export function mendOf(
	{ mend, replacement, replaces, rename }: Mend,
	column = 0,
): Pick<Fault, 'mend' | 'replacement' | 'replaces' | 'rename'> {
	return {
		...(mend !== undefined && { mend }),
		...(replacement !== undefined && { replacement }),
		...(replaces && { replaces: { from: column + replaces.from, to: column + replaces.to } }),
		...(rename && { rename }),
	};
}
