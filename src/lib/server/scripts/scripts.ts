import type { Cell, Evaluation, Options } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { NoteState } from '$lib/schemas/notes';
import { may } from '$lib/schemas/role';
import { demand, type Actor } from '../auth/access';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import * as store from '../evaluation/store';
import * as notes from '../notes/notes';
import * as revisions from '../revisions/revisions';

/** A note as a script gets it: what it says, and what was computed from that with these options. */
export interface ScriptNote {
	/** MN-014 */
	number: string;
	title: string;
	state: NoteState;
	/** Letter of the last frozen revision. */
	revision: string | null;
	/** Sequence number of the last change of the cells. */
	seq: number;
	cells: NoteContent['cells'];
	options: Options;
	results: Evaluation;
}

/** Computes cells that belong to no note. */
export async function evaluate(
	actor: Actor,
	{ cells, options }: { cells: Cell[]; options: Options },
): Promise<Evaluation> {
	demand(actor, 'readFrozen');
	return await evaluateInChild(cells, options);
}

/** The working copy at its newest sequence number; for readers the last frozen revision. */
export async function read(actor: Actor, number: string): Promise<ScriptNote> {
	demand(actor, 'readFrozen');
	return may(actor.role, 'readWorkingCopy')
		? await readWorkingCopy(actor, number)
		: await readFrozen(actor, number);
}

async function readWorkingCopy(actor: Actor, number: string): Promise<ScriptNote> {
	const { id, state, revision } = await notes.get(actor, number);
	const { seq, content, results } = await store.current(id);
	const { title, cells } = content;
	return { number, title, state, revision, seq, cells, options: optionsOf(content), results };
}

async function readFrozen(actor: Actor, number: string): Promise<ScriptNote> {
	const letter = await revisions.newest(actor, number);
	const { revision, content, results } = await revisions.get(actor, number, letter);
	const { title, cells } = content;
	return {
		number,
		title,
		state: 'frozen',
		revision: letter,
		seq: revision.seq,
		cells,
		options: optionsOf(content),
		results,
	};
}
