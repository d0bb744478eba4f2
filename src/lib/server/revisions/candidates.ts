import type { Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import type { NoteContent } from '$lib/note/document';
import type { CandidateStatus, ReviewStatus } from '$lib/schemas/review';
import { eq } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { notify } from '../db/notify';
import { candidate } from '../db/schema/review';
import { current } from '../evaluation/store';
import { lock } from '../notes/lock';
import * as notes from '../notes/notes';
import * as updates from '../notes/updates';
import * as checkpoints from '../signed-record/checkpoints';
import * as blockers from './blockers';
import { freeze } from './freeze';
import { frozenResults } from './frozen-results';
import { identify, type Credentials } from './identify';
import * as policies from './policy';
import { detailsOf, type Proposal } from './proposal';
import { statusOf } from './review';
import * as rules from './rules';
import { sign } from './sign';
import { digestOf } from './snapshot';
import * as standings from './standing';
import * as telling from './telling';
import { waivedBy } from './waivers';

/** What a person looked at when they signed. */
interface Seen extends Credentials {
	digest: string;
}

/** What an approver says beside: cautions acknowledged, and a reason for each requirement waived, by its field's name. */
interface Approval extends Seen {
	acknowledged?: boolean;
	waivers?: readonly (readonly [field: string, reason: string])[];
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

/**
 * Takes a snapshot of the working copy as the next candidate and signs it as prepared. Trials may take a while before
 * that; `signal` stops them, and then nothing is signed.
 */
export async function propose(
	actor: Actor,
	number: string,
	proposal: Proposal,
	signal?: AbortSignal,
): Promise<void> {
	demand(actor, 'write');
	const note = await notes.get(actor, number);
	await identify(actor, await policies.get(actor), proposal);
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
	const kept = await frozenResults(note.id, content, shown, signal);
	await db().transaction(async (tx) => {
		await lock(tx, note.id);
		const standing = await standings.read(tx, note.id);
		must(rules.propose(actor, standing));
		if (signal?.aborted) throw new AppError('unavailable', 'This was stopped.');
		const frozen = standing.revisions[0] && (await seqOf(tx, standing.revisions[0].candidateId));
		const details = await detailsOf(tx, actor, note, standing, proposal, { content, ...kept });
		const row = {
			noteId: note.id,
			ordinal: (standing.candidate?.ordinal ?? 0) + 1,
			seq,
			content,
			results: kept.results,
			engine: kept.results.engine,
			authors: await updates.authorsSince(note.id, frozen ?? 0),
			details,
		};
		const digest = digestOf(row);
		const [made] = await tx
			.insert(candidate)
			.values({ ...row, digest })
			.returning();
		if (!made) throw new Error('the candidate was not stored');
		await sign(tx, actor, made, 'prepared');
		await audit.record(tx, actor, 'candidate proposed', `note:${note.id}`, {
			after: { ordinal: row.ordinal, seq, digest, purpose: details.purpose },
		});
		await telling.toCheckers(tx, actor, made);
	});
	await notify(note.id, 'review');
}

/** Signs the candidate as checked. */
export async function check(actor: Actor, number: string, seen: Seen): Promise<void> {
	demand(actor, 'check');
	await decide(actor, number, seen, rules.check, async (tx, standing, open) => {
		await sign(tx, actor, open, 'checked');
		await audit.record(tx, actor, 'candidate checked', `note:${open.noteId}`, {
			after: { ordinal: open.ordinal, digest: open.digest },
		});
		const after = await standings.read(tx, open.noteId);
		if (after.candidateState === 'checked') await telling.toApprover(tx, actor, open);
	});
}

/** Signs the candidate as approved and freezes it under the next letter, which is returned. */
export async function approve(actor: Actor, number: string, given: Approval): Promise<string> {
	demand(actor, 'approve');
	const done = await decide(actor, number, given, rules.approve, async (tx, standing, open) => {
		const { waivers, left } = waivedBy(
			await blockers.of(tx, open, standing.policy),
			given.waivers ?? [],
		);
		if (left.length > 0) {
			throw new AppError('blocked', 'It cannot be frozen yet.', { details: { blockers: left } });
		}
		const cautions = open.details?.cautions.map(({ text }) => text) ?? [];
		if (cautions.length > 0 && given.acknowledged !== true) {
			throw new AppError('blocked', 'Acknowledge the caution first: tick it before you sign.');
		}
		const letter = await freeze(tx, actor, number, standing, open, {
			...(waivers.length > 0 && { waivers }),
			...(cautions.length > 0 && { cautions }),
		});
		await telling.ofRevision(tx, actor, open, standing.signOffs, { what: 'frozen' });
		return { letter, checkpoint: await checkpoints.make(tx) };
	});
	await checkpoints.keepOutside(done.checkpoint);
	return done.letter;
}

/** Sends the candidate back with a reason. */
export async function sendBack(
	actor: Actor,
	number: string,
	{ reason, ...seen }: Seen & { reason: string },
): Promise<void> {
	demand(actor, 'check');
	await decide(actor, number, seen, rules.sendBack, async (tx, standing, open) => {
		await sign(tx, actor, open, 'returned', { reason });
		await audit.record(tx, actor, 'candidate returned', `note:${open.noteId}`, {
			after: { ordinal: open.ordinal, digest: open.digest },
			reason,
		});
		await telling.ofReturn(tx, actor, open, standing.signOffs, reason);
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
	await identify(actor, await policies.get(actor), seen);
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
