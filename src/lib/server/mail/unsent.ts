import { AppError } from '$lib/errors';
import type { UnsentMail } from '$lib/schemas/mail';
import { and, desc, eq, inArray, sql } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { mail } from '../db/schema/mail';
import { person } from '../db/schema/people';
import { env } from '../env';
import { letterOf } from './letter';

/** Mail of the team that did not go out or may not have, and whether there is a mail server at all. */
export async function list(
	actor: Actor,
): Promise<{ unsent: UnsentMail[]; sentLastWeek: number; hasServer: boolean }> {
	demand(actor, 'administer');
	const rows = await db()
		.select({ mail, person })
		.from(mail)
		.innerJoin(person, eq(person.id, mail.personId))
		.where(
			and(
				eq(mail.teamId, actor.teamId),
				inArray(mail.state, ['failed', 'unknown', 'waiting']),
				// What has just been written is on its way.
				sql`(${mail.state} <> 'waiting' or ${mail.reason} <> '' or ${mail.at} < now() - interval '5 minutes')`,
			),
		)
		.orderBy(desc(mail.at))
		.limit(200);
	const [sent] = await db()
		.select({ count: sql<number>`count(*)::int` })
		.from(mail)
		.where(
			and(
				eq(mail.teamId, actor.teamId),
				eq(mail.state, 'sent'),
				sql`${mail.sentAt} > now() - interval '7 days'`,
			),
		);
	return {
		unsent: rows.map(({ mail: row, person: to }) => ({
			id: row.id,
			name: to.name,
			email: to.email,
			subject: letterOf(row.said, { ...row, name: to.name }).subject,
			state: row.state as UnsentMail['state'],
			reason: row.reason,
			tries: row.tries,
			at: row.at.toISOString(),
		})),
		sentLastWeek: sent?.count ?? 0,
		hasServer: env().SMTP_URL !== '',
	};
}

/** Lets a mail that failed, or may not have arrived, be sent once more. */
export async function again(actor: Actor, id: string): Promise<void> {
	await settle(
		actor,
		id,
		{ state: 'waiting', queuedAt: null, at: new Date(), reason: '' },
		'mail sent again',
	);
}

/** Leaves a mail unsent. */
export async function drop(actor: Actor, id: string): Promise<void> {
	await settle(actor, id, { state: 'dropped' }, 'mail dropped');
}

async function settle(
	actor: Actor,
	id: string,
	change: Partial<typeof mail.$inferInsert>,
	action: string,
): Promise<void> {
	demand(actor, 'administer');
	await db().transaction(async (tx) => {
		const rows = await tx
			.update(mail)
			.set(change)
			.where(
				and(
					eq(mail.id, id),
					eq(mail.teamId, actor.teamId),
					inArray(mail.state, ['failed', 'unknown']),
				),
			)
			.returning({ personId: mail.personId });
		if (!rows[0])
			throw new AppError('conflict', 'This mail is settled already. Load the page again.');
		await audit.record(tx, actor, action, `mail:${id}`, { after: { to: rows[0].personId } });
	});
}
