import type { Comment, Thread, ThreadChange } from '$lib/schemas/comments';

type Entry = { at: string } & ({ comment: Comment } | { change: ThreadChange });

/** What was said in a thread and what became of it, oldest first. */
export function entriesOf({ comments, changes = [] }: Thread): Entry[] {
	const entries: Entry[] = [
		...comments.map((comment) => ({ at: comment.at, comment })),
		...changes.map((change) => ({ at: change.at, change })),
	];
	return entries.sort((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : 0));
}

/** "Answered by Cass Kettering". */
export function changeWords({ what, by }: ThreadChange): string {
	const words = {
		answered: 'Answered and handed back',
		closed: 'Closed',
		reopened: 'Opened again',
		blocking: 'Made to block freezing',
		'not blocking': 'Made not to block freezing',
	};
	return `${words[what]} by ${by}`;
}
