import { hash as argon2, verify as argon2Verify } from '@node-rs/argon2';
import { dictionary } from '@zxcvbn-ts/language-common';
import { AppError } from '$lib/errors';
import { minPasswordLength } from '$lib/schemas/account';

// argon2id with the first parameters of the OWASP Password Storage Cheat Sheet: 19 MiB, 2 passes, 1 lane.
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

let common: Set<string> | undefined;
let standIn: Promise<string> | undefined;

/** What the table keeps of a password. */
export function hash(password: string): Promise<string> {
	return argon2(password.normalize('NFKC'), cost);
}

/** Whether the password is right. Takes as long where there is nothing to compare it with. */
export async function verify(
	stored: string | null | undefined,
	password: string,
): Promise<boolean> {
	const nobody = await (standIn ??= hash(crypto.randomUUID()));
	const right = await argon2Verify(stored ?? nobody, password.normalize('NFKC'));
	return right && typeof stored === 'string';
}

/** Throws AppError `invalid` where a new password is too short or among those that are tried first. */
export function demandGood(password: string): void {
	if ([...password].length < minPasswordLength) {
		throw new AppError('invalid', `A password has ${minPasswordLength} characters or more.`);
	}
	common ??= new Set(dictionary['passwords-common']);
	if (common.has(password.toLowerCase())) {
		throw new AppError(
			'invalid',
			'This password is on the lists that are tried first. Take a longer one that only you would think of.',
		);
	}
}
