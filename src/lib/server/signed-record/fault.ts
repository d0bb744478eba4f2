/** What was done to the record or to what it speaks of. */
export type FaultKind =
	| 'edited'
	| 'deleted'
	| 'deleted all'
	| 'moved'
	| 'copied'
	| 'swapped'
	| 'reordered'
	| 'truncated'
	| 'rewritten'
	| 'other key'
	| 'other document';

/** Something that does not verify: what happened, where, and a sentence about it. */
export interface Fault {
	kind: FaultKind;
	/** "entry 12", "MN-014 revision B", "audit entry 345". */
	place: string;
	sentence: string;
}

/** A fault as the lists of the verifier keep it. */
export function fault(kind: FaultKind, place: string, sentence: string): Fault {
	return { kind, place, sentence };
}
