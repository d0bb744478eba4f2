import { mailKinds, type MailChoice, type MailKind, type MailWay } from '$lib/schemas/mail';
import { eq } from 'drizzle-orm';
import * as audit from '../audit/audit';
import type { Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { mailPreference } from '../db/schema/mail';
import * as stopTokens from './stop-token';

type Chooser = Pick<Actor, 'personId' | 'teamId'>;

/** How the actor gets mail of each kind. */
export async function get({ personId }: Pick<Actor, 'personId'>): Promise<MailChoice> {
	return read(db(), personId);
}

/** Sets how the actor gets mail of each kind. */
export async function set(actor: Chooser, choice: MailChoice): Promise<void> {
	await db().transaction((tx) => write(tx, actor, choice));
}

/** What a mail's link to stop would stop; undefined where the token is none of ours. */
export function stoppable(token: string): MailKind | 'daily' | undefined {
	return stopTokens.read(token)?.kind;
}

/** Stops mail of the kind that a token from a mail names; needs no account. Gives the kind, as `stoppable` does. */
export async function stop(token: string): Promise<MailKind | 'daily' | undefined> {
	const named = stopTokens.read(token);
	if (!named) return undefined;
	const { kind } = named;
	await db().transaction(async (tx) => {
		const present = await read(tx, named.personId);
		const isStopped = (one: MailKind) =>
			kind === 'daily' ? present[one] === 'once a day' : one === kind;
		const choice = ofEach((one) => (isStopped(one) ? 'never' : present[one]));
		await write(tx, named, choice);
	});
	return kind;
}

function ofEach(way: (kind: MailKind) => MailWay): MailChoice {
	return Object.fromEntries(mailKinds.map((kind) => [kind, way(kind)])) as MailChoice;
}

async function read(connection: Connection, personId: string): Promise<MailChoice> {
	const rows = await connection
		.select({ kind: mailPreference.kind, way: mailPreference.way })
		.from(mailPreference)
		.where(eq(mailPreference.personId, personId));
	const chosen = new Map(rows.map(({ kind, way }) => [kind, way]));
	return ofEach((kind) => chosen.get(kind) ?? 'at once');
}

async function write(tx: Connection, actor: Chooser, choice: MailChoice): Promise<void> {
	const { personId } = actor;
	const before = await read(tx, personId);
	await tx.delete(mailPreference).where(eq(mailPreference.personId, personId));
	await tx
		.insert(mailPreference)
		.values(mailKinds.map((kind) => ({ personId, kind, way: choice[kind] })));
	await audit.record(tx, actor, 'mail chosen', `person:${personId}`, { before, after: choice });
}
