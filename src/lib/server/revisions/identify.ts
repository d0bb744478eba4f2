import { AppError } from '$lib/errors';
import type { Policy } from '$lib/schemas/review';
import type { Actor } from '../auth/access';
import * as signIn from '../auth/sign-in';

/** What a person gives to be known as themselves at the moment they sign. */
export interface Credentials {
	password: string;
	email?: string | undefined;
}

/** Whether a signature needs the e-mail address beside the password, because signing in is longer ago than the policy lets. */
export function needsAddress({ signedInAt }: Actor, { identifyAfterMinutes }: Policy): boolean {
	if (!signedInAt) return false;
	return Date.now() - signedInAt.getTime() >= identifyAfterMinutes * 60_000;
}

/** Asks who signs, each time anew. Throws AppError `forbidden` where the password or a needed address is wrong. */
export async function identify(actor: Actor, policy: Policy, given: Credentials): Promise<void> {
	if (needsAddress(actor, policy) && given.email !== actor.email) {
		throw new AppError(
			'forbidden',
			'You signed in too long ago to sign with the password alone: give your e-mail address too. Nothing was done.',
		);
	}
	await signIn.confirm(actor, given.password);
}
