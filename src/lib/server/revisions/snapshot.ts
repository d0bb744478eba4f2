import type { candidate } from '../db/schema/review';
import { seal } from './digest';

type Snapshot = Pick<
	typeof candidate.$inferSelect,
	'ordinal' | 'seq' | 'content' | 'results' | 'engine' | 'authors' | 'details'
>;

/** What a candidate's digest is made of, as a frozen revision keeps it. */
export function snapshotOf(row: Snapshot) {
	const { ordinal, seq, content, results, engine, authors, details } = row;
	return {
		format: 'halfdigit-candidate-2',
		...details,
		ordinal,
		seq,
		content,
		results,
		engine,
		authors,
		/** Digests of attached files, none of which a cell can hold yet. */
		files: [],
	};
}

/** The digest that sign-offs on a candidate bind to. */
export function digestOf(row: Snapshot): string {
	return seal(snapshotOf(row)).digest;
}
