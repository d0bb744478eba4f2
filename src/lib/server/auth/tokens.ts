import { createHash, randomBytes } from 'node:crypto';

/** A new session token, 256 random bits. */
export function newToken(): string {
	return randomBytes(32).toString('base64url');
}

/** What the table keeps of a token. */
export function hashOf(token: string): string {
	return createHash('sha256').update(token).digest('hex');
}
