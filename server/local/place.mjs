import { mkdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { join } from 'node:path';

/** The clone's folder, without a slash at its end. */
export const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** The folder of everything a clone makes for itself: database, secrets, notes on running processes. */
export const dataFolder = join(root, '.data');

/**
 * A path inside `.data`, which is made when it is missing.
 * @param {...string} parts
 */
export function inData(...parts) {
	mkdirSync(dataFolder, { recursive: true, mode: 0o755 });
	return join(dataFolder, ...parts);
}
