import { AppError } from '$lib/errors';
import type { Side } from '$lib/schemas/comparison';
import { may } from '$lib/schemas/role';
import { asc, eq, sql } from 'drizzle-orm';
import type { Actor } from '../auth/access';
import { db } from '../db/client';
import { candidate, revision, signOff, withdrawal } from '../db/schema/review';
import * as policies from '../revisions/policy';

/** A side with the candidate it was taken from; null for the working copy. */
export interface KnownSide extends Side {
	candidateId: string | null;
}

/** What of a note the actor may compare, the oldest first. Readers see what is frozen only. */
export async function sidesOf(actor: Actor, noteId: string): Promise<KnownSide[]> {
	const counted = (meaning: string) =>
		sql<number>`(select count(*)::int from ${signOff} where ${signOff.candidateId} = ${candidate.id} and ${signOff.meaning} = ${meaning})`;
	const rows = await db()
		.select({
			id: candidate.id,
			ordinal: candidate.ordinal,
			digest: candidate.digest,
			at: candidate.at,
			revision: { letter: revision.letter, digest: revision.digest, frozenAt: revision.frozenAt },
			withdrawnAt: withdrawal.at,
			returned: counted('returned'),
			checked: counted('checked'),
		})
		.from(candidate)
		.leftJoin(revision, eq(revision.candidateId, candidate.id))
		.leftJoin(withdrawal, eq(withdrawal.revisionId, revision.id))
		.where(eq(candidate.noteId, noteId))
		.orderBy(asc(candidate.ordinal));
	const newest = rows.findLast((row) => row.revision)?.revision?.letter;
	const { checkers } = await policies.read(db(), actor.teamId);
	const sides = rows.map((row): KnownSide => {
		if (row.revision) {
			const { letter, digest, frozenAt } = row.revision;
			return {
				key: letter,
				kind: 'revision',
				label: `Revision ${letter}`,
				standing: row.withdrawnAt ? 'withdrawn' : letter === newest ? 'valid' : 'superseded',
				at: frozenAt.toISOString(),
				digest,
				candidateId: row.id,
			};
		}
		return {
			key: `candidate-${row.ordinal}`,
			kind: 'candidate',
			label: `Candidate ${row.ordinal}`,
			standing: row.returned > 0 ? 'returned' : row.checked >= checkers ? 'checked' : 'in check',
			at: row.at.toISOString(),
			digest: row.digest,
			candidateId: row.id,
		};
	});
	if (!may(actor.role, 'readWorkingCopy')) return sides.filter(({ kind }) => kind === 'revision');
	return [...sides, workingCopy];
}

const workingCopy: KnownSide = {
	key: 'working-copy',
	kind: 'working copy',
	label: 'Working copy',
	standing: 'as it is now',
	at: null,
	digest: null,
	candidateId: null,
};

/**
 * The two sides that were asked for. Where nothing is said, the newest there is, against what came before it: of a
 * revision the revision before. Undefined where there are no two. Throws AppError `notFound`.
 */
export function chosen(
	sides: readonly KnownSide[],
	{ from, to }: { from?: string | undefined; to?: string | undefined },
): { from: KnownSide; to: KnownSide } | undefined {
	const find = (key: string) => {
		const found = sides.find((one) => one.key === key);
		if (!found) throw new AppError('notFound', 'There is no such state of this note.');
		return found;
	};
	const later = to === undefined ? sides.at(-1) : find(to);
	if (!later) return undefined;
	const earlier = from === undefined ? before(sides, later) : find(from);
	return earlier && { from: earlier, to: later };
}

function before(sides: readonly KnownSide[], side: KnownSide): KnownSide | undefined {
	const earlier = sides.slice(0, sides.indexOf(side));
	const revisionBefore = earlier.findLast(({ kind }) => kind === 'revision');
	return (side.kind === 'revision' ? revisionBefore : undefined) ?? earlier.at(-1);
}
