import { mailKinds, type MailChoice, type MailKind } from '$lib/schemas/mail';
import { eq } from 'drizzle-orm';
import type { Actor } from '../auth/access';
import { db } from '../db/client';
import { mailPreference } from '../db/schema/mail';
import * as stopTokens from './stop-token';

/** How the actor gets mail of each kind. */
export async function get(actor: Pick<Actor, 'personId'>): Promise<MailChoice> {
	const rows = await db()
		.select({ kind: mailPreference.kind, way: mailPreference.way })
		.from(mailPreference)
		.where(eq(mailPreference.personId, actor.personId));
	const chosen = new Map(rows.map(({ kind, way }) => [kind, way]));
	return Object.fromEntries(
		mailKinds.map((kind) => [kind, chosen.get(kind) ?? 'at once']),
	) as MailChoice;
}

/** Sets how the actor gets mail of each kind. */
export async function set(actor: Pick<Actor, 'personId'>, choice: MailChoice): Promise<void> {
	await db().transaction(async (tx) => {
		await tx.delete(mailPreference).where(eq(mailPreference.personId, actor.personId));
		await tx
			.insert(mailPreference)
			.values(mailKinds.map((kind) => ({ personId: actor.personId, kind, way: choice[kind] })));
	});
}

/** What a mail's link to stop would stop; undefined where the token is none of ours. */
export function stoppable(token: string): MailKind | 'daily' | undefined {
	return stopTokens.read(token)?.kind;
}

/** Stops mail of the kind that a token from a mail names; needs no account. Gives the kind, as `stoppable` does. */
export async function stop(token: string): Promise<MailKind | 'daily' | undefined> {
	const named = stopTokens.read(token);
	if (!named) return undefined;
	const { personId, kind } = named;
	const present = await get({ personId });
	const isStopped = (one: MailKind) =>
		kind === 'daily' ? present[one] === 'once a day' : one === kind;
	await set(
		{ personId },
		Object.fromEntries(
			mailKinds.map((one) => [one, isStopped(one) ? 'never' : present[one]]),
		) as MailChoice,
	);
	return kind;
}
