import { WebSocket, type ClientOptions } from 'ws';
import { messageType } from '$lib/protocol/messages';
import type { Ledger } from './ledger';
import type { Random } from './random';

/** What happens to frames on their way: share of them that come twice, and that change places with the next. */
export interface Disturbance {
	random: Random;
	twice: number;
	later: number;
	/** Counts what was done. */
	done: number;
}

/** Makes the kind of socket that enters what goes over it in a ledger, and disturbs it where that is asked for. */
export function spySocket(ledger: Ledger, disturbance: () => Disturbance | undefined) {
	return class SpySocket extends WebSocket {
		#heldOut: Uint8Array | undefined;
		#heldIn: unknown[] | undefined;

		constructor(url: string, protocols: string[], options: ClientOptions) {
			super(url, protocols, options);
		}

		override send(data: Uint8Array): void {
			ledger.onSent(data);
			const disturbs = data[0] === messageType.edit ? disturbance() : undefined;
			if (disturbs && !this.#heldOut && disturbs.random.chance(disturbs.later)) {
				disturbs.done += 1;
				this.#heldOut = data;
				// The last edit must not wait for ever.
				setTimeout(() => this.#releaseOut(), 30);
				return;
			}
			super.send(data);
			if (disturbs?.random.chance(disturbs.twice)) {
				disturbs.done += 1;
				super.send(data);
			}
			this.#releaseOut();
		}

		override emit(event: string | symbol, ...rest: unknown[]): boolean {
			if (event !== 'message') return super.emit(event, ...rest);
			const frame = new Uint8Array(rest[0] as ArrayBuffer);
			ledger.onReceived(frame);
			const disturbs = frame[0] === messageType.sync && frame[1] === 2 ? disturbance() : undefined;
			if (disturbs && !this.#heldIn && disturbs.random.chance(disturbs.later)) {
				disturbs.done += 1;
				this.#heldIn = rest;
				setTimeout(() => this.#releaseIn(), 30);
				return true;
			}
			super.emit(event, ...rest);
			if (disturbs?.random.chance(disturbs.twice)) {
				disturbs.done += 1;
				super.emit(event, ...rest);
			}
			return this.#releaseIn();
		}

		#releaseOut(): void {
			const held = this.#heldOut;
			this.#heldOut = undefined;
			if (held && this.readyState === this.OPEN) super.send(held);
		}

		#releaseIn(): boolean {
			const held = this.#heldIn;
			this.#heldIn = undefined;
			return held ? super.emit('message', ...held) : true;
		}
	};
}
