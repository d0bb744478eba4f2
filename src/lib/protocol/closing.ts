/** Largest message either side sends, in bytes. A larger one closes the socket with 1009. */
export const maxMessageBytes = 1_048_576;

/** Close codes. 4400–4499 are final, a client does not come back; all others are tried again with back-off. */
export const closeCode = {
	tooBig: 1009,
	restarting: 1012,
	malformed: 4400,
	signedOut: 4401,
	forbidden: 4403,
	notFound: 4404,
	otherEpoch: 4409,
	/** The document would be larger than a note may be. */
	tooLarge: 4413,
	/** Too many edits wait for others that have not come. */
	tooMuchPending: 4424,
	/** Messages or bytes in a time. */
	tooMany: 4429,
	/** Sockets of one person. */
	tooManyPages: 4430,
	/** What a page says of its person. */
	presenceTooBig: 4431,
	unavailable: 4503,
	/** Sockets of one note. */
	noteCrowded: 4504,
	/** The page does not read what it is sent. */
	tooSlow: 4508,
} as const;

const lost = 'Connection lost. Edits are kept and sent when it returns.';

/** At most 123 bytes each, the room in a close frame. */
const sentences: Readonly<Record<number, string>> = {
	[closeCode.tooBig]: 'An edit was too large to be sent. Reload the note and bring it in in parts.',
	[closeCode.restarting]: 'The server restarts. Edits are kept and sent in a moment.',
	[closeCode.malformed]:
		'The server could not read a message of this page. Reload the page to go on.',
	[closeCode.signedOut]:
		'You were signed out. Sign in again to go on; what is not saved yet is saved then.',
	[closeCode.forbidden]: 'Your role no longer allows you to open this working copy.',
	[closeCode.notFound]: 'This note does not exist any more.',
	[closeCode.otherEpoch]: 'The note was restored from a backup. Reload the page to go on.',
	[closeCode.tooLarge]:
		'This note is as large as a note may be. The last edit is not stored; reload and take something out.',
	[closeCode.tooMuchPending]:
		'Edits of this page wait for earlier ones that never came. Reload the page to go on.',
	[closeCode.tooMany]: 'Too many edits in a short time. Reload the page to go on.',
	[closeCode.tooManyPages]: 'You have too many notes open. Close some pages and reload this one.',
	[closeCode.presenceTooBig]:
		'This page said more of its cursor than others can be told. Reload the page to go on.',
	[closeCode.noteCrowded]: 'Too many people have this note open. The page tries again by itself.',
	[closeCode.tooSlow]:
		'The connection is too slow for what happens here. Edits are kept and sent when it returns.',
};

/** What the page says of a closing. */
export function closeSentence(code: number): string {
	return sentences[code] ?? lost;
}
