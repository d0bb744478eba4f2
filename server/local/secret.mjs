import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { inData } from './place.mjs';

/** The clone's AUTH_SECRET, made once and kept in `.data/`. */
export function authSecret() {
	const file = inData('auth-secret');
	if (!existsSync(file)) writeFileSync(file, randomBytes(32).toString('hex'), { mode: 0o600 });
	return readFileSync(file, 'utf8').trim();
}
