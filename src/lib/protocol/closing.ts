/** Largest message either side sends, in bytes. A larger one closes the socket with 1009. */
export const maxMessageBytes = 1_048_576;

/** Close codes. 4400–4499 are final, a client does not come back; all others are tried again with back-off. */
export const closeCode = {
	tooBig: 1009,
	unavailable: 4503,
	restarting: 1012,
	malformed: 4400,
	signedOut: 4401,
	forbidden: 4403,
	notFound: 4404,
	otherEpoch: 4409,
	tooMany: 4429,
} as const;

/** What the page says of a closing. */
export function closeSentence(code: number): string {
	switch (code) {
		case closeCode.signedOut:
			return 'You were signed out. Sign in again to go on; edits on this page are kept until you close it.';
		case closeCode.forbidden:
			return 'Your role no longer allows you to open this working copy.';
		case closeCode.notFound:
			return 'This note does not exist any more.';
		case closeCode.otherEpoch:
			return 'The note was restored from a backup. Reload the page to go on.';
		case closeCode.malformed:
			return 'The server could not read a message of this page. Reload the page to go on.';
		case closeCode.tooBig:
			return 'An edit was too large to be sent. Undo it, or bring it in in parts.';
		case closeCode.tooMany:
			return 'Too many edits in a short time. Reload the page to go on.';
		default:
			return 'Connection lost. Edits are kept on this page and sent when it returns.';
	}
}
