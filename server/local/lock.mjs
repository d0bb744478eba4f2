import { createHash } from 'node:crypto';
import { createServer } from 'node:net';
import { setTimeout as wait } from 'node:timers/promises';
import { root } from './place.mjs';

/**
 * Runs `work` while no other process of this clone runs work of the same name. The lock is a socket name that
 * the kernel takes back when the process ends, however it ends, so that nothing stale can stay.
 * @template T
 * @param {string} name
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function alone(name, work) {
	const digest = createHash('sha256').update(`${root}\n${name}`).digest('hex').slice(0, 32);
	const lock = await take(`\0halfdigit-${digest}`);
	try {
		return await work();
	} finally {
		await new Promise((resolve) => lock.close(resolve));
	}
}

/** @param {string} path */
async function take(path) {
	for (;;) {
		const lock = createServer((socket) => socket.destroy());
		const taken = await new Promise((resolve, reject) => {
			lock.once('error', (/** @type {NodeJS.ErrnoException} */ error) =>
				error.code === 'EADDRINUSE' ? resolve(false) : reject(error),
			);
			lock.listen(path, () => resolve(true));
		});
		if (taken) return lock;
		await wait(100);
	}
}
