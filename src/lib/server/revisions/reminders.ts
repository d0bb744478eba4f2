import { and, inArray, sql } from 'drizzle-orm';
import { db } from '../db/client';
import { noteStanding } from '../db/schema/listing';
import { candidate } from '../db/schema/review';
import * as standings from './standing';
import * as telling from './telling';

const dayMs = 24 * 3_600_000;

/** Reminds those who were asked and have not signed: the day before the one that was named, and the day after it. */
export async function remind(now = new Date()): Promise<void> {
	const dayAt = (offset: number) =>
		new Date(now.getTime() + offset * dayMs).toISOString().slice(0, 10);
	const occasions = new Map([
		[dayAt(1), 'before'],
		[dayAt(-1), 'after'],
	]);
	const rows = await db()
		.select({ noteId: candidate.noteId })
		.from(candidate)
		.innerJoin(noteStanding, sql`${noteStanding.noteId} = ${candidate.noteId}`)
		.where(
			and(
				inArray(noteStanding.state, ['in check', 'checked']),
				inArray(sql`${candidate.details}->>'due'`, [...occasions.keys()]),
			),
		);
	for (const { noteId } of rows) {
		await db().transaction(async (tx) => {
			const standing = await standings.read(tx, noteId);
			const open = standings.openCandidate(standing);
			const occasion = occasions.get(open?.details?.due ?? '');
			if (open && occasion) await telling.ofDay(tx, waitedFor(standing), open, occasion);
		});
	}
}

/** Who was asked for what is next and has not done it. */
function waitedFor({ candidate: open, candidateState, signOffs }: standings.Standing): string[] {
	const { checkers = [], approver = null } = open?.details?.asked ?? {};
	if (candidateState === 'checked') return approver ? [approver.id] : [];
	return checkers
		.map(({ id }) => id)
		.filter(
			(id) => !signOffs.some(({ meaning, personId }) => meaning === 'checked' && personId === id),
		);
}
