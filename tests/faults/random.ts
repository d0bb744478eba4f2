/** Draws that repeat from a seed (mulberry32). */
export class Random {
	#state: number;

	constructor(seed: number) {
		this.#state = seed >>> 0;
	}

	/** From 0 up to, not including, 1. */
	next(): number {
		this.#state = (this.#state + 0x6d2b79f5) >>> 0;
		let t = this.#state;
		t = Math.imul(t ^ (t >>> 15), t | 1);
		t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
		return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
	}

	/** A whole number from 0 up to, not including, `end`. */
	below(end: number): number {
		return Math.floor(this.next() * end);
	}

	chance(share: number): boolean {
		return this.next() < share;
	}

	pick<T>(list: readonly T[]): T {
		if (list.length === 0) throw new Error('there is nothing to pick from');
		return list[this.below(list.length)] as T;
	}

	/** Bytes of any kind. */
	bytes(length: number): Uint8Array {
		return Uint8Array.from({ length }, () => this.below(256));
	}
}
