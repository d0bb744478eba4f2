import { createServer } from 'node:net';

/**
 * Whether a server of ours could listen on this port of the loopback address.
 * @param {number} port
 * @returns {Promise<boolean>}
 */
export function isFree(port) {
	return new Promise((resolve) => {
		const probe = createServer();
		probe.once('error', () => resolve(false));
		probe.listen({ port, host: '127.0.0.1', exclusive: true }, () => {
			probe.close(() => resolve(true));
		});
	});
}

/**
 * The first free port from `first` on.
 * @param {number} first
 */
export async function firstFree(first) {
	for (let port = first; port < Math.min(first + 200, 65536); port++) {
		if (await isFree(port)) return port;
	}
	throw new Error(`No free port between ${first} and ${first + 199}.`);
}
