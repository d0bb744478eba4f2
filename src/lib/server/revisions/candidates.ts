import type { Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import type { NoteContent } from '$lib/note/document';
import type { CandidateStatus, ReviewStatus } from '$lib/schemas/review';
import { eq } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import * as signIn from '../auth/sign-in';
import { db, type Connection } from '../db/client';
import { notify } from '../db/notify';
import { candidate } from '../db/schema/review';
import { current } from '../evaluation/store';
import { lock } from '../notes/lock';
import * as notes from '../notes/notes';
import * as updates from '../notes/updates';
import * as blockers from './blockers';
import { seal } from './digest';
import { freeze } from './freeze';
import { frozenResults } from './frozen-results';
import { statusOf } from './review';
import * as rules from './rules';
import { sign } from './sign';
import * as standings from './standing';

/** What a person looked at when they signed. */
interface Seen {
	password: string;
	digest: string;
}

/** The newest candidate of a note with its content and results, and where the note stands. */
export async function get(
	actor: Actor,
	number: string,
): Promise<{
	candidate: CandidateStatus & { content: NoteContent; results: Evaluation; proposedAt: string };
	review: ReviewStatus;
}> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const standing = await standings.read(db(), id);
	const status = standings.candidateStatus(standing);
	if (!standing.candidate || !status) {
		throw new AppError('notFound', 'Nothing of this note was proposed yet.');
	}
	const { content, results, at } = standing.candidate;
	return {
		candidate: { ...status, content, results, proposedAt: at.toISOString() },
		review: await statusOf(db(), actor, standing),
	};
}

/** Takes a snapshot of the working copy as the next candidate and signs it as prepared. */
export async function propose(actor: Actor, number: string, password: string): Promise<void> {
	demand(actor, 'write');
	const note = await notes.get(actor, number);
	await signIn.confirm(actor, password);
	const { seq, content, results: shown, pending } = await current(note.id);
	if (pending) {
		throw new AppError('blocked', 'Edits are still arriving. Wait until the page says Saved.');
	}
	const faults = blockers.faults(content, shown);
	if (faults.length > 0) {
		throw new AppError('blocked', 'A line with an error cannot be proposed.', {
			details: { blockers: faults },
		});
	}
	const results = await frozenResults(note.id, content, shown);
	await db().transaction(async (tx) => {
		await lock(tx, note.id);
		const standing = await standings.read(tx, note.id);
		must(rules.propose(actor, standing));
		const frozen = standing.revisions[0] && (await seqOf(tx, standing.revisions[0].candidateId));
		const ordinal = (standing.candidate?.ordinal ?? 0) + 1;
		const authors = await updates.authorsSince(note.id, frozen ?? 0);
		const { digest } = seal({
			format: 'halfdigit-candidate-1',
			team: { id: actor.teamId, name: actor.teamName },
			note: number,
			ordinal,
			seq,
			content,
			results,
			engine: results.engine,
			authors,
		});
		const at = new Date();
		const [made] = await tx
			.insert(candidate)
			.values({
				noteId: note.id,
				ordinal,
				seq,
				content,
				results,
				engine: results.engine,
				authors,
				digest,
				at,
			})
			.returning({ id: candidate.id, digest: candidate.digest });
		if (!made) throw new Error('the candidate was not stored');
		await sign(tx, actor, made, 'prepared', at);
		await audit.record(tx, actor, 'candidate proposed', `note:${note.id}`, {
			after: { ordinal, seq, digest },
		});
	});
	await notify(note.id, 'review');
}

/** Signs the candidate as checked. */
export async function check(actor: Actor, number: string, seen: Seen): Promise<void> {
	demand(actor, 'check');
	await decide(actor, number, seen, rules.check, async (tx, standing, open) => {
		const at = new Date();
		await sign(tx, actor, open, 'checked', at);
		await audit.record(tx, actor, 'candidate checked', `note:${open.noteId}`, {
			after: { ordinal: open.ordinal, digest: open.digest },
		});
	});
}

/** Signs the candidate as approved and freezes it under the next letter, which is returned. */
export async function approve(actor: Actor, number: string, seen: Seen): Promise<string> {
	demand(actor, 'approve');
	return await decide(actor, number, seen, rules.approve, async (tx, standing, open) => {
		const blocked = await blockers.of(tx, open);
		if (blocked.length > 0) {
			throw new AppError('blocked', 'It cannot be frozen yet.', { details: { blockers: blocked } });
		}
		return await freeze(tx, actor, number, standing, open);
	});
}

/** Sends the candidate back with a reason. */
export async function sendBack(
	actor: Actor,
	number: string,
	{ reason, ...seen }: Seen & { reason: string },
): Promise<void> {
	demand(actor, 'check');
	await decide(actor, number, seen, rules.sendBack, async (tx, standing, open) => {
		const at = new Date();
		await sign(tx, actor, open, 'returned', at, reason);
		await audit.record(tx, actor, 'candidate returned', `note:${open.noteId}`, {
			after: { ordinal: open.ordinal, digest: open.digest },
			reason,
		});
	});
}

/** One deed on the open candidate: password first, then under the note's lock the rule, then the deed. */
async function decide<T>(
	actor: Actor,
	number: string,
	seen: Seen,
	rule: (actor: Actor, standing: standings.Standing) => true | string,
	deed: (tx: Connection, standing: standings.Standing, open: standings.CandidateRow) => Promise<T>,
): Promise<T> {
	const note = await notes.get(actor, number);
	await signIn.confirm(actor, seen.password);
	const done = await db().transaction(async (tx) => {
		await lock(tx, note.id);
		const standing = await standings.read(tx, note.id);
		must(rule(actor, standing));
		const open = standings.openCandidate(standing);
		if (open?.digest !== seen.digest) {
			throw new AppError('conflict', 'The candidate is another one by now. Look at it first.');
		}
		return await deed(tx, standing, open);
	});
	await notify(note.id, 'review');
	return done;
}

function must(answer: true | string): void {
	if (answer !== true) throw new AppError('conflict', answer);
}

async function seqOf(tx: Connection, candidateId: string): Promise<number | undefined> {
	const [row] = await tx
		.select({ seq: candidate.seq })
		.from(candidate)
		.where(eq(candidate.id, candidateId));
	return row?.seq;
}
