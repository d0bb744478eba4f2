import type { Model } from './model';
import { compile } from './program';
import { stretchLength, Trials } from './trials';

/** Trials that several threads draw together, each taking the next stretch that nobody has. All of it is shared memory. */
export interface SharedDraw {
	/** Values of each output. */
	values: Float64Array[];
	/** Number of the next stretch, and how many are drawn. */
	counter: Int32Array;
	trials: number;
	seed: number;
}

const [next, drawn] = [0, 1];

export function sharedDraw(outputs: number, trials: number, seed: number): SharedDraw {
	const bytes = trials * Float64Array.BYTES_PER_ELEMENT;
	return {
		values: Array.from({ length: outputs }, () => new Float64Array(new SharedArrayBuffer(bytes))),
		counter: new Int32Array(new SharedArrayBuffer(2 * Int32Array.BYTES_PER_ELEMENT)),
		trials,
		seed,
	};
}

/** Draws stretches until none is left. `onProgress` is told how many trials all threads have drawn. */
export function takePart(
	model: Model,
	outputs: readonly number[],
	{ values, counter, trials, seed }: SharedDraw,
	onProgress?: (drawn: number, total: number) => void,
): void {
	const own = new Trials(model, compile(model, outputs), seed);
	const stretches = Math.ceil(trials / stretchLength);
	for (;;) {
		const stretch = Atomics.add(counter, next, 1);
		if (stretch >= stretches) return;
		const from = stretch * stretchLength;
		own.draw(stretch, Math.min(stretchLength, trials - from), values, from);
		const done = Atomics.add(counter, drawn, 1) + 1;
		Atomics.notify(counter, drawn);
		if (done % 20 === 0) onProgress?.(Math.min(trials, done * stretchLength), trials);
	}
}

/** Waits for the stretches that other threads still draw. Throws where one of them does not end. */
export function awaitOthers({ counter, trials }: SharedDraw, mostMs = 10_000): void {
	const stretches = Math.ceil(trials / stretchLength);
	for (let done = Atomics.load(counter, drawn); done < stretches;) {
		if (Atomics.wait(counter, drawn, done, mostMs) === 'timed-out')
			throw new Error('another thread does not end its trials');
		done = Atomics.load(counter, drawn);
	}
}
