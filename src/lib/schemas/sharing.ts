import { z } from 'zod';
import { minPasswordLength } from './account';
import { typed } from './text';

/** How long a new link may last, in days; '' is until it is revoked. */
const linkDays = ['7', '30', '365', ''] as const;

export const newLink = z.object({
	name: typed.trim().min(1, 'Say for whom the link is.').max(80, 'At most 80 characters.'),
	days: z
		.enum(linkDays, 'Say how long the link may last.')
		.transform((days) => (days === '' ? null : Number(days))),
	password: typed
		.max(200, 'At most 200 characters.')
		.refine((password) => password === '' || [...password].length >= minPasswordLength, {
			error: `A password has ${minPasswordLength} characters or more.`,
		})
		.default(''),
});

export const linkChoice = z.object({ id: z.uuid('There is no such link.') });

export const unlocking = z.object({
	password: typed.min(1, 'Give the password.').max(200, 'At most 200 characters.'),
});

/** A link to one frozen revision, as those see it who may make one. Nobody sees its token again. */
export interface SharedLink {
	id: string;
	name: string;
	madeBy: string;
	hasPassword: boolean;
	createdAt: string;
	lastUsedAt: string | null;
	expiresAt: string | null;
	state: 'open' | 'expired' | 'revoked';
}
