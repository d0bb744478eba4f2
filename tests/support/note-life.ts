import type { NoteCell } from '$lib/note/document';
import type { Actor } from '$lib/server/auth/access';
import * as notes from '$lib/server/notes/notes';
import * as updates from '$lib/server/notes/updates';
import * as candidates from '$lib/server/revisions/candidates';
import type { Proposal } from '$lib/server/revisions/proposal';
import { placedCells } from '$lib/note/document';
import { testPassword as password, type Cast } from './people';

const sound: Omit<NoteCell, 'id'>[] = [
	{ kind: 'text', source: '## Purpose\n\nThe divider gives {{V_out}}.' },
	{ kind: 'calculation', source: 'V_in = 10 V\nV_out = V_in / 4' },
	{ kind: 'requirement', source: 'V_out <= 3 V' },
];

/** A note of the author's that can be proposed and frozen, unless other cells are given. */
export async function writeNote(author: Actor, title = 'Divider', cells = sound) {
	return await notes.create(author, { title, cells });
}

export async function propose(author: Actor, number: string): Promise<void> {
	await candidates.propose(author, number, proposal());
}

/** What a proposal says where a test does not care. */
export function proposal(said: Partial<Proposal> = {}): Proposal {
	return {
		password,
		purpose: 'Release of the board',
		changes: 'The load is in it now.',
		checkers: [],
		approver: '',
		due: '',
		...said,
	};
}

/** What a person signs who looks at the newest candidate. */
export async function seen(actor: Actor, number: string) {
	return { password, digest: (await candidates.get(actor, number)).candidate.digest };
}

export async function check({ engineer }: Cast, number: string): Promise<void> {
	await candidates.check(engineer, number, await seen(engineer, number));
}

/** Proposes, checks and approves a note; returns the letter. */
export async function freeze(cast: Cast, number: string): Promise<string> {
	await propose(cast.author, number);
	await check(cast, number);
	return await candidates.approve(cast.approver, number, await seen(cast.approver, number));
}

/** Adds text at the end of a cell, as an edit of the person. */
export async function edit(person: Actor, noteId: string, cell: number, text: string) {
	await updates.change(noteId, person.personId, (doc) => {
		const source = placedCells(doc)[cell]?.text;
		if (!source) throw new Error(`there is no cell ${cell}`);
		source.insert(source.length, text);
	});
}
