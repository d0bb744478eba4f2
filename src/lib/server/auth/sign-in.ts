import { AppError } from '$lib/errors';
import { eq } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { db } from '../db/client';
import { person } from '../db/schema/people';
import type { Actor } from './access';
import * as passwords from './passwords';
import * as sessions from './sessions';
import * as throttle from './throttle';

/**
 * Opens a session for the person of this e-mail and password and returns its new token.
 * Throws AppError `unauthenticated`, the same for a wrong password and an unknown person, or `tooMany`.
 */
export async function withPassword(
	{ email, password }: { email: string; password: string },
	from: { address: string; userAgent: string | null },
): Promise<string> {
	const attempt = await throttle.begin(email, from.address);
	const [found] = await db()
		.select({ id: person.id, passwordHash: person.passwordHash })
		.from(person)
		.where(eq(person.email, email));
	const right = await passwords.verify(found?.passwordHash, password);
	if (!found || !right) {
		throw new AppError('unauthenticated', 'The e-mail address or the password is wrong.');
	}
	const actor = await sessions.findMember(found.id);
	if (!actor) {
		throw new AppError('forbidden', 'Your account belongs to no team. Ask your administrator.');
	}
	return await db().transaction(async (tx) => {
		await throttle.succeed(tx, attempt);
		await audit.record(tx, actor, 'signed in', `person:${actor.personId}`);
		return await sessions.open(tx, actor, from.userAgent);
	});
}

/** Asks the signed-in person's password again. Throws AppError `forbidden` where it is wrong. */
export async function confirm(actor: Actor, password: string): Promise<void> {
	const attempt = await throttle.begin(actor.email, `session of ${actor.personId}`);
	const [found] = await db()
		.select({ passwordHash: person.passwordHash })
		.from(person)
		.where(eq(person.id, actor.personId));
	if (!(await passwords.verify(found?.passwordHash, password))) {
		throw new AppError('forbidden', 'The password is wrong. Nothing was done.');
	}
	await throttle.succeed(db(), attempt);
}

/** Changes the actor's password, ends all their sessions and returns the token of a new one. */
export async function changePassword(
	actor: Actor,
	{ present, next }: { present: string; next: string },
	userAgent: string | null,
): Promise<string> {
	passwords.demandGood(next);
	await confirm(actor, present);
	const passwordHash = await passwords.hash(next);
	return await db().transaction(async (tx) => {
		await tx.update(person).set({ passwordHash }).where(eq(person.id, actor.personId));
		await audit.record(tx, actor, 'password changed', `person:${actor.personId}`);
		await sessions.removeAll(tx, actor);
		return await sessions.open(tx, actor, userAgent);
	});
}
