import { messageType } from '$lib/protocol/messages';
import * as encoding from 'lib0/encoding';
import { messageYjsSyncStep2, writeSyncStep1, writeUpdate } from 'y-protocols/sync';
import type * as Y from 'yjs';

/** All that a page lacked. */
export function whole(bytes: Uint8Array): Uint8Array {
	return write(messageType.sync, (encoder) => {
		encoding.writeVarUint(encoder, messageYjsSyncStep2);
		encoding.writeVarUint8Array(encoder, bytes);
	});
}

/** Asks a page for what the document lacks. */
export function question(doc: Y.Doc): Uint8Array {
	return write(messageType.sync, (encoder) => writeSyncStep1(encoder, doc));
}

export function update(bytes: Uint8Array): Uint8Array {
	return write(messageType.sync, (encoder) => writeUpdate(encoder, bytes));
}

/** Presence of clients, null where one is gone; without any it keeps a quiet connection alive. */
export function presence(
	entries: readonly { clientId: number; clock: number; state: object | null }[],
): Uint8Array {
	const body = encoding.createEncoder();
	encoding.writeVarUint(body, entries.length);
	for (const { clientId, clock, state } of entries) {
		encoding.writeVarUint(body, clientId);
		encoding.writeVarUint(body, clock);
		encoding.writeVarString(body, JSON.stringify(state));
	}
	return write(messageType.awareness, (encoder) =>
		encoding.writeVarUint8Array(encoder, encoding.toUint8Array(body)),
	);
}

function write(type: number, body: (encoder: encoding.Encoder) => void): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, type);
	body(encoder);
	return encoding.toUint8Array(encoder);
}
