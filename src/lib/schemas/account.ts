import { z } from 'zod';
import { role } from './role';
import { typed } from './text';

/** Longer ones are refused before they are hashed. */
const maxPasswordLength = 200;
export const minPasswordLength = 8;

export const signIn = z.object({
	email: z
		.string()
		.trim()
		.toLowerCase()
		.max(254, 'This address is too long.')
		.pipe(z.email('Give your e-mail address, as in name@firm.example.')),
	password: z
		.string()
		.min(1, 'Give your password.')
		.max(maxPasswordLength, `At most ${maxPasswordLength} characters.`),
	/** Where to go afterwards. */
	to: z.string().catch('/notes'),
});

export const passwordChange = z.object({
	present: z
		.string()
		.min(1, 'Give your present password.')
		.max(maxPasswordLength, `At most ${maxPasswordLength} characters.`),
	next: z
		.string()
		.min(minPasswordLength, `A password has ${minPasswordLength} characters or more.`)
		.max(maxPasswordLength, `At most ${maxPasswordLength} characters.`),
});

/** How long a new token may last, in days; '' is until it is revoked. */
const tokenDays = ['30', '90', '365', ''] as const;

export const newToken = z.object({
	name: typed
		.trim()
		.min(1, 'Name the token after the script that will use it.')
		.max(80, 'At most 80 characters.'),
	days: z
		.enum(tokenDays, 'Say how long the token may last.')
		.transform((days) => (days === '' ? null : Number(days))),
});

export const tokenChoice = z.object({ id: z.uuid('There is no such token.') });

export const roleChange = z.object({ personId: typed.min(1).max(64), role });
