import type { Evaluation, Options } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import { cautionsOf } from '$lib/note/cautions';
import type { NoteContent } from '$lib/note/document';
import type { ProposalDetails } from '$lib/schemas/review';
import { may, type Deed } from '$lib/schemas/role';
import { eq } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { membership, person } from '../db/schema/people';
import type { Credentials } from './identify';
import type { Standing } from './standing';

/** What a person says who proposes. */
export interface Proposal extends Credentials {
	purpose: string;
	changes: string;
	/** Ids of the people asked; '' or none where nobody in particular is. */
	checkers: string[];
	approver: string;
	/** 2026-12-24, or ''. */
	due: string;
}

interface Person {
	id: string;
	name: string;
}

/** The people of the actor's team who can be asked to check and to approve. */
export async function askable(actor: Actor): Promise<{ checkers: Person[]; approvers: Person[] }> {
	demand(actor, 'readWorkingCopy');
	return {
		checkers: await peopleWho('check', db(), actor.teamId),
		approvers: await peopleWho('approve', db(), actor.teamId),
	};
}

/** What a candidate carries beside content and results. Throws AppError `invalid` where something is missing. */
export async function detailsOf(
	tx: Connection,
	actor: Actor,
	note: { id: string; number: string },
	standing: Standing,
	{ purpose, changes, checkers, approver, due }: Proposal,
	snapshot: { content: NoteContent; results: Evaluation; options: Options },
): Promise<ProposalDetails> {
	const { candidate, candidateState, nextLetter, revisions } = standing;
	if (candidate && changes === '') {
		const before =
			candidateState === 'returned'
				? `candidate ${candidate.ordinal} was returned`
				: `revision ${revisions[0]?.letter} was frozen`;
		throw new AppError('invalid', `Say what changed since ${before}.`);
	}
	return {
		team: { id: actor.teamId, name: actor.teamName },
		note: { id: note.id, number: note.number },
		letter: nextLetter,
		purpose,
		changes,
		asked: {
			checkers: await asked(tx, actor, 'check', checkers),
			approver: (await asked(tx, actor, 'approve', approver === '' ? [] : [approver]))[0] ?? null,
		},
		due: due === '' ? null : due,
		options: snapshot.options,
		cautions: cautionsOf(snapshot.content, snapshot.results),
	};
}

async function asked(
	tx: Connection,
	actor: Actor,
	deed: Deed,
	ids: readonly string[],
): Promise<Person[]> {
	const able = await peopleWho(deed, tx, actor.teamId);
	return ids.map((id) => {
		const found = able.find((one) => one.id === id);
		if (!found) throw new AppError('invalid', `One of the people asked may not ${deed} notes.`);
		return found;
	});
}

async function peopleWho(deed: Deed, connection: Connection, teamId: string): Promise<Person[]> {
	const rows = await connection
		.select({ id: person.id, name: person.name, role: membership.role })
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.where(eq(membership.teamId, teamId))
		.orderBy(person.name, person.id);
	return rows.filter(({ role }) => may(role, deed)).map(({ id, name }) => ({ id, name }));
}
