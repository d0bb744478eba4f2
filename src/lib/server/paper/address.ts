/** Digits of the digest in the address: nobody guesses 128 bits, and the code stays coarse enough for a poor print. */
const digits = 32;

/** The public page that says whether the revision of this digest is still the current one. */
export function addressOf(digest: string, origin: string): string {
	return `${origin}/r/${digest.slice(0, digits)}`;
}
