import { ChildProcess } from 'node:child_process';
import { Server, Socket } from 'node:net';

/** What a module does while it is loaded that it may only do when it is called: throw, connect, listen, start a process. */
export async function effectsOf(load: () => Promise<unknown>): Promise<string[]> {
	const effects: string[] = [];
	const restore = [
		replace(Socket.prototype, 'connect', () => effects.push('connects')),
		replace(Server.prototype, 'listen', () => effects.push('listens')),
		replace(ChildProcess.prototype as ChildProcess & Spawner, 'spawn', () =>
			effects.push('starts a process'),
		),
	];
	try {
		await load();
	} catch (error) {
		effects.push(`throws ${error instanceof Error ? error.message : String(error)}`);
	} finally {
		for (const undo of restore) undo();
	}
	return effects;
}

/** What `fork` and `spawn` call in the end. */
interface Spawner {
	spawn(options: unknown): number;
}

/** Puts a note-taker in front of a method; the method still works, so that the test's own tools do. */
function replace<T extends object, K extends keyof T>(
	owner: T,
	name: K,
	note: () => void,
): () => void {
	const original = owner[name] as (...words: unknown[]) => unknown;
	owner[name] = function (this: T, ...words: unknown[]): unknown {
		note();
		return original.apply(this, words);
	} as T[K];
	return () => {
		owner[name] = original as T[K];
	};
}
