import { z } from 'zod';

/** What mail is about; people choose for each how they get it. */
export const mailKinds = ['requests', 'returns', 'revisions', 'mentions', 'reminders'] as const;
export type MailKind = (typeof mailKinds)[number];

/** How somebody gets mail of a kind. */
export const mailWays = ['at once', 'once a day', 'never'] as const;
export type MailWay = (typeof mailWays)[number];

const way = z.enum(mailWays, 'Choose one of the ways that are offered.');

/** The choice for every kind, as its form sends it. */
export const mailChoice = z.object({
	requests: way,
	returns: way,
	revisions: way,
	mentions: way,
	reminders: way,
});
export type MailChoice = z.output<typeof mailChoice>;

/** A mail that an administrator deals with. */
export const mailRow = z.object({ id: z.uuid('Choose one of the mails that are listed.') });

/** What a mail says of a note; its sentences are made when it is sent. */
export interface Said {
	what: 'check' | 'approve' | 'returned' | 'frozen' | 'withdrawn' | 'mentioned' | 'due';
	/** MN-014 */
	number: string;
	title: string;
	/** Letter of the candidate or revision. */
	letter: string;
	/** Who did it; '' where nobody did. */
	by: string;
	/** What they said: the purpose, the reason, the comment. */
	words: string;
	/** Day by which an answer is wanted, 2026-12-24. */
	due: string | null;
	/** Where to go, beginning with a stroke. */
	path: string;
}

/** A mail that did not go out, as administrators see it. */
export interface UnsentMail {
	id: string;
	/** Who was to get it. */
	name: string;
	email: string;
	subject: string;
	/** `unknown`: the connection broke while it was handed over, so that it may have arrived. */
	state: 'waiting' | 'failed' | 'unknown';
	reason: string;
	tries: number;
	/** ISO 8601 */
	at: string;
}
