import { z } from 'zod';
import { typed } from './text';
import { trialChanges, type AttachedTrial } from './trial';

export const threadKinds = ['question', 'correction', 'remark'] as const;

/** A Yjs relative position, in base64. */
const position = z.string().regex(/^[A-Za-z0-9+/]{1,200}={0,2}$/);

/** A stretch of a cell's source that a comment is about. */
const anchor = z.strictObject({
	/** A whole line of formulas, or some words. */
	kind: z.enum(['line', 'words']),
	/** Where it begins and ends, whatever is written around it. */
	start: position,
	end: position,
	/** What stood there; found again by it where the positions say nothing. */
	quote: typed.min(1).max(1000),
});
export type Anchor = z.infer<typeof anchor>;

export const newThread = z.object({
	cellId: typed.min(1).max(40),
	anchor: anchor.optional(),
	kind: z.enum(threadKinds),
	blocking: z.boolean(),
	body: typed.trim().min(1, 'Write something first.').max(4000, 'At most 4 000 characters.'),
	/** Changed inputs that the comment speaks of. */
	trial: trialChanges.optional(),
});

/** `answers` hands the thread back to whoever opened it. */
export const newComment = newThread
	.pick({ body: true, trial: true })
	.extend({ answers: z.boolean().optional() });

export const threadChange = z.union([
	z.strictObject({ closed: z.boolean() }),
	z.strictObject({ blocking: z.boolean() }),
]);

/** Where a thread stands. One that is answered waits for whoever opened it to close it. */
type Disposition = 'open' | 'answered' | 'closed';

export interface Comment {
	id: string;
	person: { id: string; name: string };
	/** With the names of those it mentions. */
	body: string;
	/** Who is named in it; absent where nobody is. */
	mentions?: { id: string; name: string }[];
	trial?: AttachedTrial;
	/** ISO 8601 */
	at: string;
}

/** What became of a thread, and who did it. */
export interface ThreadChange {
	what: 'answered' | 'closed' | 'reopened' | 'blocking' | 'not blocking';
	by: string;
	/** ISO 8601 */
	at: string;
}

/** A comment that names somebody. */
export interface Mention {
	/** MN-014 */
	number: string;
	title: string;
	threadId: string;
	cellId: string;
	disposition: Disposition;
	blocking: boolean;
	/** Who wrote it. */
	byId: string;
	by: string;
	body: string;
	/** ISO 8601 */
	at: string;
}

/** A thread on a cell, comments oldest first. */
export interface Thread {
	id: string;
	cellId: string;
	kind: (typeof threadKinds)[number];
	blocking: boolean;
	/** Absent where it is about the whole cell. */
	anchor?: Anchor;
	/** Set while it is handed back to whoever opened it. */
	answered?: { at: string; by: string };
	closed: { at: string; by: string } | null;
	/** What became of it, oldest first; absent where nothing did yet. */
	changes?: ThreadChange[];
	comments: Comment[];
}

export function dispositionOf({
	closed,
	answered,
}: Pick<Thread, 'closed' | 'answered'>): Disposition {
	return closed ? 'closed' : answered ? 'answered' : 'open';
}
