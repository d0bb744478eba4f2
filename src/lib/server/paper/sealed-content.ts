import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { Thread } from '$lib/schemas/comments';
import type { ProposalDetails } from '$lib/schemas/review';
import type { PersonalStatement, Statement } from '../signed-record/statement';

/** A sealed revision's file as the paper reads it. It is set only after its seal was checked. */
export interface SealedContent {
	format: string;
	revision: {
		format: string;
		team: { name: string };
		note: { number: string };
		letter: string;
		proposal: ProposalDetails & {
			content: NoteContent;
			results: Evaluation;
			engine: string;
			authors: { name: string }[];
		};
		review: Thread[];
		signatures: Signature[];
		frozenAt: string;
		previous: string | null;
		replaces: { letter: string; reason: string } | null;
	};
	seal: { keyId: string; statement: { contentHash: string } };
}

interface Signature {
	keyId: string;
	statement: PersonalStatement & Pick<Statement, 'time' | 'timeSource'>;
}
