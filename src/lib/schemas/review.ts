import { z } from 'zod';
import type { Options } from '$lib/calc/results';
import type { Caution } from '$lib/note/cautions';
import type { NoteState } from './notes';
import { typed } from './text';

const password = z.string().min(1, 'Give your password.').max(200, 'At most 200 characters.');
/** Asked beside the password where signing in is long ago. */
const email = typed.trim().toLowerCase().max(254).optional();
const reason = (question: string) =>
	typed.trim().min(1, question).max(2000, 'At most 2 000 characters.');

/** Begins the names of the fields that ask one person each to check. */
export const askPrefix = 'ask-';
/** Begins the names of the fields that give a reason for waiving one requirement each. */
export const waivePrefix = 'waive-';

/** What a proposal says. Nothing is signed but what stands on the sheet at that moment. */
export const proposing = z.looseObject({
	password,
	email,
	purpose: typed
		.trim()
		.min(1, 'Say what the candidate is for.')
		.max(200, 'At most 200 characters.'),
	changes: typed.trim().max(2000, 'At most 2 000 characters.').default(''),
	approver: typed.max(64).default(''),
	due: z.union([z.literal(''), z.iso.date('Give the day as 2026-12-24.')]).default(''),
});

/** `digest` says what the person looked at. */
export const signing = z.object({
	password,
	email,
	digest: z.string().regex(/^[0-9a-f]{64}$/, 'Reload the page and look at it again.'),
});
/** Cautions are acknowledged by a tick, requirements waived by a reason each. */
export const approving = z.looseObject({ ...signing.shape, caution: typed.optional() });
export const returning = signing.extend({ reason: reason('Say why it goes back.') });
export const withdrawing = signing.extend({ reason: reason('Say why it is withdrawn.') });

const flag = z
	.string()
	.optional()
	.transform((sent) => sent === 'on');

/** A policy as its form sends it: what is not ticked is not sent. */
export const policyChange = z.object({
	checkers: z.coerce
		.number('Give a number of checkers.')
		.int('Give a whole number of checkers.')
		.min(1, 'At least one person checks.')
		.max(5, 'At most five people check.'),
	authorsMayCheck: flag,
	authorsMayApprove: flag,
	checkersMayApprove: flag,
	undecidedBlocks: flag,
	commentsBlock: flag,
	waivers: flag,
	identifyAfterMinutes: z.coerce
		.number('Give a number of minutes.')
		.int('Give a whole number of minutes.')
		.min(0, 'Not below 0 minutes.')
		.max(10_080, 'At most 10 080 minutes, which is a week.'),
});
export type Policy = z.output<typeof policyChange>;

/** What somebody dropped or typed to have it verified. */
export const verifying = z.object({ digest: typed.max(200).default('') });

/** Values of the fields whose name begins so, by the rest of the name; blank ones are left out. */
export function fieldsNamed(prefix: string, input: Record<string, unknown>): [string, string][] {
	return Object.entries(input).flatMap(([name, value]): [string, string][] => {
		const text = typeof value === 'string' ? value.replaceAll('\0', '').trim() : '';
		return name.startsWith(prefix) && text !== '' ? [[name.slice(prefix.length), text]] : [];
	});
}

interface Named {
	id: string;
	name: string;
}

/** What a candidate carries beside content and results. */
export interface ProposalDetails {
	team: Named;
	note: { id: string; number: string };
	/** Letter it gets when it is frozen. */
	letter: string;
	purpose: string;
	/** What changed since the candidate or revision before it; '' for the first. */
	changes: string;
	asked: { checkers: Named[]; approver: Named | null };
	/** Day by which an answer is wanted, 2026-12-24. */
	due: string | null;
	options: Options;
	cautions: Caution[];
}

export interface Waiver {
	cell: string;
	line: number;
	/** The requirement as it is written. */
	requirement: string;
	reason: string;
}

/** What a signature covers beside its candidate. */
export interface SignatureDetails {
	waivers?: Waiver[];
	/** The cautions that were acknowledged. */
	cautions?: string[];
}

export type Meaning = 'prepared' | 'checked' | 'approved' | 'returned';

export interface SignOff {
	meaning: Meaning;
	/** Name as printed at the time. */
	name: string;
	personId: string;
	/** ISO 8601 */
	at: string;
	reason: string | null;
	/** Requirements waived with it. */
	waivers?: Waiver[];
	/** Cautions acknowledged with it. */
	cautions?: string[];
}

/** One thing that the team's policy asks of a candidate before it is frozen. */
export interface Condition extends Blocker {
	fulfilled: boolean;
}

/** A reason why the candidate cannot be frozen, with the cell to look at where there is one. */
export interface Blocker {
	text: string;
	cellId?: string;
	/** Set where the approver may waive it: the name of the form's field behind its prefix, and the requirement. */
	waivable?: { field: string; requirement: string };
}

export interface CandidateStatus {
	ordinal: number;
	state: 'in check' | 'checked' | 'returned' | 'approved';
	/** SHA-256, hexadecimal. */
	digest: string;
	authors: { id: string; name: string }[];
	signOffs: SignOff[];
	details: ProposalDetails | null;
}

export interface Withdrawal {
	/** Name as printed at the time. */
	name: string;
	/** ISO 8601 */
	at: string;
	reason: string;
}

export interface FrozenStatus {
	letter: string;
	/** SHA-256, hexadecimal. */
	digest: string;
	frozenAt: string;
	/** Set where it is no longer valid for this reason; a newer letter supersedes it in any case. */
	withdrawn: Withdrawal | null;
}

/** Where a note stands on its way to a frozen revision; what the foot bar and title block show. */
export interface ReviewStatus {
	state: NoteState;
	nextLetter: string;
	/** The newest candidate, whatever became of it. */
	candidate: CandidateStatus | null;
	/** Newest first. */
	revisions: FrozenStatus[];
	/** Why the newest candidate cannot be frozen now; empty where none is open. */
	blockers: Blocker[];
	/** What the policy asks of the newest candidate, and what of it is fulfilled; empty where none is open. */
	conditions: Condition[];
	/** Whether a signature of this person's needs the e-mail address too. */
	identify: boolean;
	/** What this person may do now; for each refusal a sentence says why. */
	can: Record<'propose' | 'check' | 'approve' | 'return', true | string>;
}
