import * as Y from 'yjs';
import { decodeJson, messageType, type Refused, type Saved } from '$lib/protocol/messages';
import * as decoding from 'lib0/decoding';
import type { Operation } from './operations';

/** Clocks of a Yjs client, from the first up to, not including, the last. */
interface Span {
	client: number;
	from: number;
	to: number;
}

/**
 * What was written in a note and what the server acknowledged of it, taken from the frames that go over the sockets: the
 * page's own account plays no part. An operation is known by its Yjs client and clock, which every edit carries.
 */
export class Ledger {
	readonly operations: Operation[] = [];
	readonly refusals: string[] = [];
	/** Edits acknowledged, each once. */
	readonly edits = new Set<string>();
	/** Instant of the last acknowledgement, on the clock of `performance`. */
	lastAt = 0;
	readonly #at = new Map<number, Map<number, { operation: Operation; to: number }>>();
	readonly #sent = new Map<string, Span[]>();

	/** Notes an operation that made these structs. */
	wrote(operation: Operation, { client, from, to }: Span): void {
		this.operations.push(operation);
		const own = this.#at.get(client) ?? new Map<number, { operation: Operation; to: number }>();
		this.#at.set(client, own.set(from, { operation, to }));
	}

	/** Reads a frame that a page sends. */
	onSent(frame: Uint8Array): void {
		const decoder = decoding.createDecoder(frame);
		if (decoding.readVarUint(decoder) !== messageType.edit) return;
		const id = decoding.readVarString(decoder);
		if (!this.#sent.has(id)) this.#sent.set(id, spansOf(decoding.readVarUint8Array(decoder)));
	}

	/** Reads a frame that a page gets. */
	onReceived(frame: Uint8Array): void {
		const decoder = decoding.createDecoder(frame);
		const type = decoding.readVarUint(decoder);
		if (type === messageType.saved) decodeJson<Saved>(decoder).ids.forEach((id) => this.#saved(id));
		if (type === messageType.refused) this.refusals.push(decodeJson<Refused>(decoder).reason);
	}

	#saved(id: string): void {
		this.lastAt = performance.now();
		if (!this.edits.has(id)) this.edits.add(id);
		for (const { client, from, to } of this.#sent.get(id) ?? []) {
			const own = this.#at.get(client);
			for (let clock = from; clock < to;) {
				const found = own?.get(clock);
				if (found && found.to <= to) found.operation.acknowledged = true;
				clock = found ? found.to : clock + 1;
			}
		}
		this.#sent.delete(id);
	}
}

function spansOf(update: Uint8Array): Span[] {
	return Y.decodeUpdate(update)
		.structs.filter((struct) => !(struct instanceof Y.Skip))
		.map(({ id, length }) => ({ client: id.client, from: id.clock, to: id.clock + length }));
}
