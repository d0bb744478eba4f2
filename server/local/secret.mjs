import { generateKeyPairSync, randomBytes } from 'node:crypto';
import { existsSync, linkSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { inData } from './place.mjs';

/** The clone's AUTH_SECRET, made once and kept in `.data/`. */
export function authSecret() {
	const file = inData('auth-secret');
	if (!existsSync(file)) writeFileSync(file, randomBytes(32).toString('hex'), { mode: 0o600 });
	return readFileSync(file, 'utf8').trim();
}

/** The file of the clone's signing key, made once and kept in `.data/`. */
export function signingKeyFile() {
	const file = inData('signing-key.pem');
	if (!existsSync(file)) {
		const { privateKey } = generateKeyPairSync('ed25519');
		const draft = `${file}.${process.pid}`;
		writeFileSync(draft, privateKey.export({ format: 'pem', type: 'pkcs8' }), { mode: 0o600 });
		try {
			// Whole at once and never over another one: several processes may start together.
			linkSync(draft, file);
		} catch (error) {
			if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
		}
		rmSync(draft);
	}
	return file;
}
