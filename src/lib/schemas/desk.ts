/** Why something waits for a person. */
export type ShelfName = 'check' | 'approve' | 'returned' | 'mentions' | 'blocking' | 'requirements';

/** One thing that waits for a person. */
export interface Waiting {
	/** MN-014 */
	number: string;
	title: string;
	/** Where it is dealt with. */
	href: string;
	/** What is asked or said, in a few words. */
	what: string;
	/** Day by which an answer is wanted, 2026-12-24. */
	due: string | null;
	/** Whether that day is over. */
	isLate: boolean;
}

/** Everything that waits for a person for one reason, the most urgent first. */
export interface Shelf {
	name: ShelfName;
	items: Waiting[];
}
