import type { Said } from '$lib/schemas/mail';
import type { SignOff } from '$lib/schemas/review';
import type { Actor } from '../auth/access';
import type { Connection } from '../db/client';
import { tell } from '../mail/outbox';
import type { CandidateRow } from './standing';

type Teller = Pick<Actor, 'personId' | 'name'>;

/** Asks the people by mail who were asked to check. */
export async function toCheckers(tx: Connection, by: Teller, made: CandidateRow): Promise<void> {
	const asked = made.details?.asked.checkers.map(({ id }) => id) ?? [];
	await send(tx, except(by, asked), made, { what: 'check', by: by.name, words: purpose(made) });
}

/** Tells the approver who was asked that a candidate is checked. */
export async function toApprover(tx: Connection, by: Teller, open: CandidateRow): Promise<void> {
	const { approver = null } = open.details?.asked ?? {};
	const words = purpose(open);
	await send(tx, approver ? [approver.id] : [], open, { what: 'approve', by: by.name, words });
}

/** Tells those who wrote and prepared a candidate that it came back. */
export async function ofReturn(
	tx: Connection,
	by: Teller,
	open: CandidateRow,
	signOffs: readonly SignOff[],
	reason: string,
): Promise<void> {
	const people = except(by, [...authorsOf(open), ...signersOf(signOffs, ['prepared'])]);
	await send(tx, people, open, { what: 'returned', by: by.name, words: reason });
}

/** Tells everybody who had a part in a candidate that it is frozen, or was withdrawn with this reason. */
export async function ofRevision(
	tx: Connection,
	by: Teller,
	candidate: CandidateRow,
	signOffs: readonly SignOff[],
	{ what, reason = '' }: { what: 'frozen' | 'withdrawn'; reason?: string },
): Promise<void> {
	const signers = signersOf(signOffs, ['prepared', 'checked', 'approved']);
	const { number, letter } = namesOf(candidate);
	await send(tx, except(by, [...authorsOf(candidate), ...signers]), candidate, {
		what,
		by: by.name,
		words: reason,
		path: `/notes/${number}/revisions/${letter}`,
	});
}

/** Reminds people of a candidate's day, once for each `occasion`. */
export async function ofDay(
	tx: Connection,
	personIds: readonly string[],
	open: CandidateRow,
	occasion: string,
): Promise<void> {
	await send(tx, personIds, open, { what: 'due', by: '', words: purpose(open) }, occasion);
}

type Words = Pick<Said, 'what' | 'by' | 'words'> & { path?: string };

async function send(
	tx: Connection,
	personIds: readonly string[],
	candidate: CandidateRow,
	{ what, by, words, path }: Words,
	occasion = '',
): Promise<void> {
	// Candidates from before people could be asked.
	if (!candidate.details) return;
	const { team, due } = candidate.details;
	const { number, letter } = namesOf(candidate);
	const title = candidate.content.title.trim() || 'Untitled';
	await tell(tx, personIds, {
		teamId: team.id,
		key: [what, candidate.id, occasion].filter(Boolean).join(' '),
		said: {
			...{ what, number, title, letter, by, words },
			due: what === 'check' || what === 'approve' || what === 'due' ? due : null,
			path: path ?? `/notes/${number}/candidate`,
		},
	});
}

function namesOf({ details }: CandidateRow): { number: string; letter: string } {
	return { number: details?.note.number ?? '', letter: details?.letter ?? '' };
}

const purpose = ({ details }: CandidateRow) => details?.purpose ?? '';
const authorsOf = ({ authors }: CandidateRow) => authors.map(({ id }) => id);
const except = ({ personId }: Teller, ids: readonly string[]) =>
	ids.filter((id) => id !== personId);

function signersOf(
	signOffs: readonly SignOff[],
	meanings: readonly SignOff['meaning'][],
): string[] {
	return signOffs.flatMap(({ meaning, personId }) =>
		meanings.includes(meaning) && personId ? [personId] : [],
	);
}
