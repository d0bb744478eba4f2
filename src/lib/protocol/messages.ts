import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';

/**
 * Message types on a note's socket. 0 and 1 are those of y-protocols (sync, awareness); the rest are ours.
 * Every message starts with its type as a variable-length unsigned integer.
 *
 * A client sends: sync step 1 (0,0), awareness (1), `edit`, `more`.
 * A server sends: sync step 2 and updates (0,1 and 0,2), awareness (1), `hello`, `saved`, `refused`, `results`, `news`,
 * `authors`, `part` (of a long step 2, see `parts.ts`), and `changes` in place of later `results` where the address ends
 * in `?results=changes` (see `changes.ts`).
 * An edit carries an id chosen by the client. It is acknowledged by that id after the commit, never before; a client
 * sends what was not acknowledged again, under the same id, after it has reconnected.
 */
export const messageType = {
	sync: 0,
	awareness: 1,
	edit: 100,
	more: 101,
	hello: 110,
	saved: 111,
	refused: 112,
	results: 113,
	news: 114,
	part: 115,
	changes: 116,
	authors: 120,
} as const;

/** First message on a socket. `epoch` names the document's life: a copy of another epoch must not be merged. */
export interface Hello {
	epoch: string;
	mayWrite: boolean;
	personId: string;
	/** Things in the document that no note holds; they count for nothing. */
	leftOut?: number;
}

/** Edits that are committed, by client edit id, and the note's sequence number after them. */
export interface Saved {
	ids: string[];
	seq: number;
	/** ISO 8601 time of the commit. */
	at: string;
}

/** An edit that will not be stored. */
export interface Refused {
	id: string;
	reason: string;
}

/** Something outside the document changed; the page reads it anew. */
export interface News {
	about: 'comments' | 'review';
}

/** Who wrote last in cells: all cells at first, then those where it changed. */
export interface Authors {
	/** By cell id; `at` is the ISO 8601 time of the commit. */
	cells: Record<string, { personId: string; name: string; at: string }>;
}

export function encodeEdit(id: string, update: Uint8Array): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, messageType.edit);
	encoding.writeVarString(encoder, id);
	encoding.writeVarUint8Array(encoder, update);
	return encoding.toUint8Array(encoder);
}

/** Reads an edit behind its type. Throws on a truncated message. */
export function decodeEdit(decoder: decoding.Decoder): { id: string; update: Uint8Array } {
	return { id: decoding.readVarString(decoder), update: decoding.readVarUint8Array(decoder) };
}

type JsonType = 'hello' | 'saved' | 'refused' | 'results' | 'news' | 'authors';

/** A server message whose body is JSON. */
export function encodeJson(type: JsonType, body: unknown): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, messageType[type]);
	encoding.writeVarString(encoder, JSON.stringify(body));
	return encoding.toUint8Array(encoder);
}

/** The same of a body that is JSON already. */
export function encodeText(type: 'results' | 'changes', body: string): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, messageType[type]);
	encoding.writeVarString(encoder, body);
	return encoding.toUint8Array(encoder);
}

export function decodeJson<T>(decoder: decoding.Decoder): T {
	return JSON.parse(decoding.readVarString(decoder)) as T;
}
