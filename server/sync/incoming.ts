import { decodeEdit, messageType } from '$lib/protocol/messages';
import { decodeMore } from '$lib/protocol/parts';
import * as decoding from 'lib0/decoding';
import { messageYjsSyncStep1, messageYjsSyncStep2, messageYjsUpdate } from 'y-protocols/sync';
import { decodeStateVector } from 'yjs';
import { maxPresence } from './limits';

/** What one page says about one client of a document; null: gone. */
export interface Said {
	clientId: number;
	clock: number;
	state: unknown;
}

export type Incoming =
	| { kind: 'question'; stateVector: Uint8Array }
	/** An answer that brings nothing, as pages that send all they have as edits give it. */
	| { kind: 'nothing' }
	| { kind: 'update' }
	| { kind: 'edit'; id: string; update: Uint8Array }
	| { kind: 'presence'; said: Said[] }
	/** A part of a long answer has come. */
	| { kind: 'more'; answer: number; index: number };

/** Presence that is longer than it may be. */
export class PresenceTooBig extends Error {}

const editId = /^[\w-]{1,64}$/;

/** Reads a whole message before anything acts on it. Throws where it is truncated, too long or of no known kind. */
export function decode(message: Uint8Array): Incoming {
	// A copy with a buffer of its own: a wrong length inside must not reach what lies beside the message.
	const decoder = decoding.createDecoder(Uint8Array.from(message));
	const incoming = read(decoder);
	if (decoding.hasContent(decoder)) throw new Error('bytes behind the message');
	return incoming;
}

function read(decoder: decoding.Decoder): Incoming {
	const type = decoding.readVarUint(decoder);
	switch (type) {
		case messageType.sync:
			return readSync(decoder);
		case messageType.awareness:
			return { kind: 'presence', said: readPresence(decoding.readVarUint8Array(decoder)) };
		case messageType.more:
			return { kind: 'more', ...decodeMore(decoder) };
		case messageType.edit: {
			const edit = decodeEdit(decoder);
			if (!editId.test(edit.id)) throw new Error('an edit without a proper id');
			return { kind: 'edit', ...edit };
		}
		default:
			throw new Error(`a message of unknown type ${type}`);
	}
}

function readSync(decoder: decoding.Decoder): Incoming {
	const step = decoding.readVarUint(decoder);
	const bytes = decoding.readVarUint8Array(decoder);
	if (step === messageYjsSyncStep1) {
		decodeStateVector(bytes);
		return { kind: 'question', stateVector: bytes };
	}
	if (step !== messageYjsSyncStep2 && step !== messageYjsUpdate) {
		throw new Error(`a sync message of unknown step ${step}`);
	}
	return { kind: isNothing(bytes) ? 'nothing' : 'update' };
}

/** Whether an update holds neither content nor deletions. */
function isNothing(update: Uint8Array): boolean {
	return update.length === 2 && update[0] === 0 && update[1] === 0;
}

function readPresence(bytes: Uint8Array): Said[] {
	if (bytes.length > maxPresence.bytes) throw new PresenceTooBig('presence of too many bytes');
	const decoder = decoding.createDecoder(Uint8Array.from(bytes));
	const count = decoding.readVarUint(decoder);
	if (count > maxPresence.clients) throw new PresenceTooBig('presence of too many clients');
	const said = Array.from({ length: count }, () => ({
		clientId: decoding.readVarUint(decoder),
		clock: decoding.readVarUint(decoder),
		state: JSON.parse(decoding.readVarString(decoder)) as unknown,
	}));
	if (decoding.hasContent(decoder)) throw new Error('bytes behind the presence');
	return said;
}
