import type { FaultCode } from './results';

export interface Mend {
	mend?: string;
	replacement?: string;
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
