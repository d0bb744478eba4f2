import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import { z } from 'zod';

/** A session of work: what one person did to a note without a pause of more than ten minutes. */
export interface WorkSession {
	person: { id: string; name: string };
	/** ISO 8601 times of the first and last edit. */
	from: string;
	to: string;
	/** Sequence numbers of the first and last edit; others' edits may lie between. */
	firstSeq: number;
	seq: number;
	edits: number;
	/** Ids of the cells that came, went or changed their text. */
	cells: string[];
}

/** What a note said at a sequence number. */
export interface Moment {
	/** The number asked for, or the end of the stretch that it was folded into. */
	seq: number;
	/** Who made the last edit up to here, and when (ISO 8601). */
	by: { id: string; name: string };
	at: string;
	content: NoteContent;
	results: Evaluation;
	/** Who had written last in each cell, by cell id. */
	authors: Record<string, { personId: string; name: string; at: string }>;
}

/** A sequence number in an address. */
export const seqInAddress = z.coerce.number().int().min(1).max(Number.MAX_SAFE_INTEGER);
