import { and, asc, eq, isNull, lt, or, sql } from 'drizzle-orm';
import { db } from '../db/client';
import { mail } from '../db/schema/mail';
import { person } from '../db/schema/people';
import { env } from '../env';
import { carry, type Handed } from './carrier';
import { letterOf } from './letter';

/** Longest time that handing a mail over takes; what is under way longer belongs to a process that is gone. */
const longestMs = 2 * 60_000;

/** Mail older than this tells nobody anything new. */
const staleMs = 7 * 24 * 3_600_000;

/** Ids of mail that waits and has no job yet; they are taken as queued. */
export async function takeWaiting(now = new Date()): Promise<string[]> {
	const requeued = new Date(now.getTime() - 3_600_000);
	const waiting = db()
		.select({ id: mail.id })
		.from(mail)
		.where(and(eq(mail.state, 'waiting'), or(isNull(mail.queuedAt), lt(mail.queuedAt, requeued))))
		.orderBy(asc(mail.at))
		.limit(200);
	const rows = await db()
		.update(mail)
		.set({ queuedAt: now })
		.where(sql`${mail.id} in (${waiting})`)
		.returning({ id: mail.id });
	return rows.map(({ id }) => id);
}

/** Mail that a process had under way when it ended may have arrived: it is left to people to decide. */
export async function settleBroken(now = new Date()): Promise<void> {
	await db()
		.update(mail)
		.set({ state: 'unknown', reason: 'It was being handed over when the program ended.' })
		.where(and(eq(mail.state, 'sending'), lt(mail.sendingAt, new Date(now.getTime() - longestMs))));
}

/** Hands a waiting mail over, once. Throws where it did not go and should be tried again. */
export async function deliver(id: string, now = new Date()): Promise<void> {
	const [taken] = await db()
		.update(mail)
		.set({ state: 'sending', sendingAt: now, tries: sql`${mail.tries} + 1` })
		.where(and(eq(mail.id, id), eq(mail.state, 'waiting')))
		.returning();
	// Sent already, or taken back.
	if (!taken) return;
	const [to] = await db().select().from(person).where(eq(person.id, taken.personId));
	const handed: Handed =
		!to || now.getTime() - taken.at.getTime() > staleMs
			? { kind: 'refused', reason: 'It is older than a week and was not sent any more.' }
			: await carry(env().SMTP_URL, {
					...letterOf(taken.said, { ...taken, name: to.name }),
					id,
					from: env().MAIL_FROM,
					to: { name: to.name, address: to.email },
				});
	await db().update(mail).set(after(handed)).where(eq(mail.id, id));
	if (handed.kind === 'later') throw new Error(handed.reason);
}

function after(handed: Handed): Partial<typeof mail.$inferInsert> {
	switch (handed.kind) {
		case 'sent':
			return { state: 'sent', sentAt: new Date(), reason: '' };
		case 'later':
			return { state: 'waiting', reason: handed.reason };
		case 'refused':
			return { state: 'failed', reason: handed.reason };
		case 'unknown':
			return { state: 'unknown', reason: handed.reason };
	}
}

/** After the last try. */
export async function giveUp(id: string): Promise<void> {
	await db()
		.update(mail)
		.set({ state: 'failed' })
		.where(and(eq(mail.id, id), eq(mail.state, 'waiting')));
}
