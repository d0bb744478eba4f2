import { z } from 'zod';
import { dispositionOf, threadKinds, type Thread } from './comments';

/** A tick as a form sends it. */
const tick = z
	.literal('on')
	.optional()
	.catch(undefined)
	.transform((sent) => sent === 'on');

/** Which threads are wanted, as an address says it; what cannot be read counts as not said. */
export const threadFilter = z.object({
	open: tick,
	blocking: tick,
	mine: tick,
	named: tick,
	kind: z.enum(['', ...threadKinds]).catch(''),
});
export type ThreadFilter = z.infer<typeof threadFilter>;

/** Every thread. */
export const anyThread: ThreadFilter = {
	open: false,
	blocking: false,
	mine: false,
	named: false,
	kind: '',
};

/** Whether a thread is one of those wanted. What waits for somebody is open: it may be answered, not closed. */
export function isWanted(thread: Thread, filter: ThreadFilter, personId: string): boolean {
	const { comments, blocking, kind } = thread;
	return (
		(!filter.open || dispositionOf(thread) !== 'closed') &&
		(!filter.blocking || blocking) &&
		(!filter.mine || comments.some(({ person }) => person.id === personId)) &&
		(!filter.named ||
			comments.some(({ mentions = [] }) => mentions.some(({ id }) => id === personId))) &&
		(filter.kind === '' || filter.kind === kind)
	);
}

/** Whether a filter leaves anything out. */
export function isFiltering(filter: ThreadFilter): boolean {
	return filter.open || filter.blocking || filter.mine || filter.named || filter.kind !== '';
}
