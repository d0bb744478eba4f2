import { AsyncLocalStorage } from 'node:async_hooks';

/** How far a clock is off, in ms; may change while it runs. */
export interface Clock {
	offMs: number;
}

const clocks = new AsyncLocalStorage<Clock>();
const RealDate = Date;
const realNow = Date.now.bind(Date);

/** Runs work, and every timer and socket that comes of it, by a clock of its own. */
export function runBy<T>(clock: Clock, work: () => T): T {
	return clocks.run(clock, work);
}

/**
 * Makes the process's dates follow the clock they are asked under. To be called before the packages are loaded that
 * keep `Date.now` for themselves.
 */
export function installClocks(): void {
	const now = () => realNow() + (clocks.getStore()?.offMs ?? 0);
	globalThis.Date = new Proxy(RealDate, {
		construct: (target, given: unknown[], newTarget) =>
			Reflect.construct(target, given.length === 0 ? [now()] : given, newTarget) as Date,
		apply: () => new RealDate(now()).toString(),
		get: (target, name, receiver) =>
			name === 'now' ? now : (Reflect.get(target, name, receiver) as unknown),
	});
}
