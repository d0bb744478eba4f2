import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { messageType } from './messages';

/** Bytes of an answer that travel as one message. A longer one comes in parts. */
export const maxPartBytes = 256 * 1024;

/** A piece of the server's answer to the question what a page lacks. */
export interface Part {
	/** Tells the answers of one socket apart. */
	answer: number;
	index: number;
	count: number;
	bytes: Uint8Array;
}

/** Number of parts of an answer. */
export function countParts(bytes: Uint8Array): number {
	return Math.ceil(bytes.length / maxPartBytes);
}

export function encodePart(answer: number, bytes: Uint8Array, index: number): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, messageType.part);
	encoding.writeVarUint(encoder, answer);
	encoding.writeVarUint(encoder, index);
	encoding.writeVarUint(encoder, countParts(bytes));
	const start = index * maxPartBytes;
	encoding.writeVarUint8Array(encoder, bytes.subarray(start, start + maxPartBytes));
	return encoding.toUint8Array(encoder);
}

/** Reads a part behind its type. Throws on a truncated message. */
export function decodePart(decoder: decoding.Decoder): Part {
	return {
		answer: decoding.readVarUint(decoder),
		index: decoding.readVarUint(decoder),
		count: decoding.readVarUint(decoder),
		bytes: decoding.readVarUint8Array(decoder),
	};
}

/** Tells the server that a part has come. It is never more than two ahead, so that a slow line stays free for the rest. */
export function encodeMore({ answer, index }: Part): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, messageType.more);
	encoding.writeVarUint(encoder, answer);
	encoding.writeVarUint(encoder, index);
	return encoding.toUint8Array(encoder);
}

/** Reads it behind its type. */
export function decodeMore(decoder: decoding.Decoder): { answer: number; index: number } {
	return { answer: decoding.readVarUint(decoder), index: decoding.readVarUint(decoder) };
}

/** Puts the parts of an answer together. */
export class PartsInbox {
	#answer: number | undefined;
	#parts: Uint8Array[] = [];

	/** Takes the next part; returns the whole answer with its last one. A part out of turn drops what there is. */
	take({ answer, index, count, bytes }: Part): Uint8Array | undefined {
		if (answer !== this.#answer || index !== this.#parts.length) this.clear();
		if (index !== this.#parts.length) return undefined;
		this.#answer = answer;
		this.#parts.push(bytes.slice());
		if (this.#parts.length < count) return undefined;
		const whole = joined(this.#parts);
		this.clear();
		return whole;
	}

	clear(): void {
		this.#answer = undefined;
		this.#parts = [];
	}
}

function joined(parts: readonly Uint8Array[]): Uint8Array {
	const whole = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
	let at = 0;
	for (const part of parts) {
		whole.set(part, at);
		at += part.length;
	}
	return whole;
}
