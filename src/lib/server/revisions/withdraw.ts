import { AppError } from '$lib/errors';
import { and, eq } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { notify } from '../db/notify';
import { candidate, revision, withdrawal } from '../db/schema/review';
import { lock } from '../notes/lock';
import * as notes from '../notes/notes';
import * as checkpoints from '../signed-record/checkpoints';
import * as entries from '../signed-record/entries';
import { identify, type Credentials } from './identify';
import * as policies from './policy';
import * as standings from './standing';
import * as telling from './telling';

/** Takes a note's newest revision back, with a reason, signed. The revision stays as it is and says so from then on. */
export async function withdraw(
	actor: Actor,
	number: string,
	letter: string,
	{ digest, reason, ...credentials }: Credentials & { digest: string; reason: string },
): Promise<void> {
	demand(actor, 'approve');
	const note = await notes.get(actor, number);
	await identify(actor, await policies.get(actor), credentials);
	const made = await db().transaction(async (tx) => {
		await lock(tx, note.id);
		const { revisions } = await standings.read(tx, note.id);
		const found = revisions.find((one) => one.letter === letter);
		if (!found) throw new AppError('notFound', 'There is no such revision.');
		if (found.withdrawn) {
			throw new AppError('conflict', `${found.withdrawn.name} withdrew it already.`);
		}
		if (revisions[0] !== found) {
			throw new AppError('conflict', `Revision ${revisions[0]?.letter} supersedes it already.`);
		}
		if (found.digest !== digest) {
			throw new AppError('conflict', 'This is not the revision you looked at. Look at it first.');
		}
		const { personId, name, role, teamId } = actor;
		const { index, at } = await entries.append(tx, {
			kind: 'withdrawal',
			document: { team: teamId, note: note.id, number },
			revision: letter,
			contentHash: digest,
			signer: { id: personId, name, role },
			meaning: 'withdrawn',
			method: 'password',
			reason,
		});
		const [row] = await tx
			.select({ id: revision.id })
			.from(revision)
			.where(and(eq(revision.noteId, note.id), eq(revision.letter, letter)));
		await tx.insert(withdrawal).values({
			revisionId: row?.id ?? '',
			personId,
			personName: name,
			role,
			reason,
			method: 'password',
			digest,
			entry: index,
			at,
		});
		await audit.record(tx, actor, 'revision withdrawn', `note:${note.id}`, {
			after: { letter, digest },
			reason,
		});
		const [candidateRow] = await tx
			.select()
			.from(candidate)
			.where(eq(candidate.id, found.candidateId));
		if (candidateRow) {
			const signOffs = await standings.signOffsOf(tx, candidateRow.id);
			await telling.ofRevision(tx, actor, candidateRow, signOffs, { what: 'withdrawn', reason });
		}
		return await checkpoints.make(tx);
	});
	await checkpoints.keepOutside(made);
	await notify(note.id, 'review');
}
