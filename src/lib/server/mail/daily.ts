import { and, asc, eq, inArray } from 'drizzle-orm';
import { db, type Connection } from '../db/client';
import { mail } from '../db/schema/mail';

/** Makes one mail for each person and team of what was gathered for them; again on the same day makes none. */
export async function gather(now = new Date()): Promise<void> {
	const people = await db()
		.selectDistinct({ personId: mail.personId, teamId: mail.teamId })
		.from(mail)
		.where(eq(mail.state, 'gathered'));
	for (const one of people) await db().transaction((tx) => gatherFor(tx, one, now));
}

async function gatherFor(
	tx: Connection,
	{ personId, teamId }: { personId: string; teamId: string },
	now: Date,
): Promise<void> {
	const rows = await tx
		.select({ id: mail.id, said: mail.said })
		.from(mail)
		.where(and(eq(mail.personId, personId), eq(mail.teamId, teamId), eq(mail.state, 'gathered')))
		.orderBy(asc(mail.at))
		.for('update');
	if (rows.length === 0) return;
	const made = await tx
		.insert(mail)
		.values({
			...{ personId, teamId },
			kind: 'daily',
			key: `daily ${teamId} ${now.toISOString().slice(0, 10)}`,
			said: rows.flatMap(({ said }) => said),
			state: 'waiting',
		})
		.onConflictDoNothing()
		.returning({ id: mail.id });
	if (made.length === 0) return;
	const ids = rows.map(({ id }) => id);
	await tx.update(mail).set({ state: 'told' }).where(inArray(mail.id, ids));
}
