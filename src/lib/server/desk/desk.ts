import type { Shelf, Waiting } from '$lib/schemas/desk';
import { may } from '$lib/schemas/role';
import { demand, type Actor } from '../auth/access';
import { mentionsOf } from '../comments/mentions';
import { db } from '../db/client';
import { blockingOf } from './blocking';
import { notesOf, type DeskNote } from './desk-notes';
import { shortened } from './shortened';
import * as rules from '../revisions/rules';
import * as standings from '../revisions/standing';

/** What waits for the actor, by reason; shelves that can hold nothing for the role are left out. */
export async function read(actor: Actor, now = new Date()): Promise<Shelf[]> {
	demand(actor, 'readWorkingCopy');
	const notes = await notesOf(actor);
	const standing = await standingsOf(
		notes.filter(
			({ state }) => state === 'in check' || state === 'checked' || state === 'returned',
		),
	);
	const today = now.toISOString().slice(0, 10);
	const shelves: Shelf[] = [];
	if (may(actor.role, 'check')) {
		shelves.push({ name: 'check', items: asked(actor, standing, today, 'check') });
	}
	if (may(actor.role, 'approve')) {
		shelves.push({ name: 'approve', items: asked(actor, standing, today, 'approve') });
	}
	if (may(actor.role, 'write')) {
		shelves.push({ name: 'returned', items: returned(actor, standing) });
	}
	shelves.push({ name: 'mentions', items: await mentioned(actor) });
	if (may(actor.role, 'write')) {
		const mine = notes.filter(({ isMine }) => isMine);
		shelves.push(
			{ name: 'blocking', items: await blockingOf(mine) },
			{ name: 'requirements', items: mine.filter(({ notMet }) => notMet > 0).map(unmet) },
		);
	}
	return shelves;
}

interface Stood {
	note: DeskNote;
	standing: standings.Standing;
}

async function standingsOf(notes: readonly DeskNote[]): Promise<Stood[]> {
	const stood: Stood[] = [];
	for (const note of notes) stood.push({ note, standing: await standings.read(db(), note.id) });
	return stood;
}

/** Open candidates that the actor may sign now: those they were asked for, and those nobody in particular was. */
function asked(
	actor: Actor,
	stood: readonly Stood[],
	today: string,
	deed: 'check' | 'approve',
): Waiting[] {
	return stood
		.flatMap(({ note, standing }): Waiting[] => {
			const open = standings.openCandidate(standing);
			if (!open || rules[deed](actor, standing) !== true) return [];
			const { checkers = [], approver = null } = open.details?.asked ?? {};
			const wanted = deed === 'check' ? checkers : approver ? [approver] : [];
			if (wanted.length > 0 && !wanted.some(({ id }) => id === actor.personId)) return [];
			const due = open.details?.due ?? null;
			return [
				{
					...nameOf(note),
					href: `/notes/${note.number}/candidate`,
					what: open.details?.purpose ?? `Candidate ${open.ordinal}`,
					due,
					isLate: due !== null && due < today,
				},
			];
		})
		.sort((a, b) => (a.due ?? '9').localeCompare(b.due ?? '9'));
}

/** Candidates that came back, for whoever prepared or wrote them. */
function returned(actor: Actor, stood: readonly Stood[]): Waiting[] {
	return stood.flatMap(({ note, standing: { candidate, candidateState, signOffs } }) => {
		if (!candidate || candidateState !== 'returned') return [];
		const isMine =
			candidate.authors.some(({ id }) => id === actor.personId) ||
			signOffs.some(
				({ meaning, personId }) => meaning === 'prepared' && personId === actor.personId,
			);
		if (!isMine) return [];
		const back = signOffs.find(({ meaning }) => meaning === 'returned');
		return [
			{
				...nameOf(note),
				href: `/notes/${note.number}/candidate`,
				what: back ? `${back.name}: ${back.reason ?? ''}` : '',
				due: null,
				isLate: false,
			},
		];
	});
}

/** Open comments that name the actor; those of their own wait for nobody. */
async function mentioned(actor: Actor): Promise<Waiting[]> {
	const found = await mentionsOf(actor);
	return found
		.filter(({ disposition, byId }) => disposition === 'open' && byId !== actor.personId)
		.map(({ number, title, cellId, by, body }) => ({
			...{ number, title },
			href: `/notes/${number}#cell-${cellId}`,
			what: `${by}: ${shortened(body)}`,
			due: null,
			isLate: false,
		}));
}

function unmet(note: DeskNote): Waiting {
	return {
		...nameOf(note),
		href: `/notes/${note.number}`,
		what: note.notMet === 1 ? 'one requirement not met' : `${note.notMet} requirements not met`,
		due: null,
		isLate: false,
	};
}

const nameOf = ({ number, title }: DeskNote) => ({ number, title });
