import { z } from 'zod';
import { typed } from './text';
import { trialChanges, type AttachedTrial } from './trial';

export const threadKinds = ['question', 'correction', 'remark'] as const;

export const newThread = z.object({
	cellId: typed.min(1).max(40),
	kind: z.enum(threadKinds),
	blocking: z.boolean(),
	body: typed.trim().min(1, 'Write something first.').max(4000, 'At most 4 000 characters.'),
	/** Changed inputs that the comment speaks of. */
	trial: trialChanges.optional(),
});

export const newComment = newThread.pick({ body: true, trial: true });

export const threadChange = z.object({ closed: z.boolean() });

export interface Comment {
	id: string;
	person: { id: string; name: string };
	body: string;
	trial?: AttachedTrial;
	/** ISO 8601 */
	at: string;
}

/** A thread on a cell, comments oldest first. */
export interface Thread {
	id: string;
	cellId: string;
	kind: (typeof threadKinds)[number];
	blocking: boolean;
	closed: { at: string; by: string } | null;
	comments: Comment[];
}
