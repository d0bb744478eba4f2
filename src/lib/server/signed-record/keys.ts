import {
	createHash,
	createPrivateKey,
	createPublicKey,
	sign,
	verify,
	type KeyObject,
} from 'node:crypto';
import { readFileSync, statSync } from 'node:fs';
import { AppError } from '$lib/errors';
import { env } from '../env';

/** The installation's key as it signs. */
export interface SigningKey {
	id: string;
	/** SPKI, DER, base64. */
	publicKey: string;
	sign: (bytes: Buffer) => string;
}

const mend = 'Nothing was signed. Ask the administrator of the installation (SIGNING_KEY_FILE).';

/**
 * Reads the key that SIGNING_KEY_FILE names, anew each time, so that a key is never used after its file is gone.
 * Throws AppError `unavailable` that says what is wrong with it.
 */
export function current(): SigningKey {
	const { SIGNING_KEY_FILE: file } = env();
	if (file === '') throw refusal('The installation has no signing key.');
	return read(file);
}

/** Reads a private key from a file that only its owner may read. */
export function read(file: string): SigningKey {
	const privateKey = parse(contentsOf(file));
	if (privateKey.asymmetricKeyType !== 'ed25519') {
		throw refusal('The signing key of the installation is no Ed25519 key.');
	}
	const publicKey = spkiOf(createPublicKey(privateKey));
	return {
		id: idOf(publicKey),
		publicKey,
		sign: (bytes) => sign(null, bytes, privateKey).toString('base64'),
	};
}

/** Names a public key: the first 16 hexadecimal digits of the SHA-256 of its SPKI. */
export function idOf(publicKey: string): string {
	return createHash('sha256').update(Buffer.from(publicKey, 'base64')).digest('hex').slice(0, 16);
}

/** Whether a signature is that of the key over the bytes. */
export function isSignedBy(publicKey: string, bytes: Buffer, signature: string): boolean {
	try {
		const key = createPublicKey({
			key: Buffer.from(publicKey, 'base64'),
			format: 'der',
			type: 'spki',
		});
		return verify(null, bytes, key, Buffer.from(signature, 'base64'));
	} catch {
		return false;
	}
}

/** The 32 bytes of an Ed25519 public key: its SPKI ends with them (RFC 8410). */
export function rawOf(publicKey: string): Buffer {
	return Buffer.from(publicKey, 'base64').subarray(-32);
}

function contentsOf(file: string): string {
	try {
		if ((statSync(file).mode & 0o077) !== 0) {
			throw refusal('The signing key of the installation may be read by others (chmod 600).');
		}
		return readFileSync(file, 'utf8');
	} catch (cause) {
		if (cause instanceof AppError) throw cause;
		throw refusal('The signing key of the installation is missing or cannot be read.', cause);
	}
}

function parse(pem: string): KeyObject {
	try {
		return createPrivateKey(pem);
	} catch (cause) {
		throw refusal('The signing key of the installation is no private key in PEM.', cause);
	}
}

function spkiOf(key: KeyObject): string {
	return key.export({ format: 'der', type: 'spki' }).toString('base64');
}

function refusal(sentence: string, cause?: unknown): AppError {
	return new AppError('unavailable', `${sentence} ${mend}`, { cause });
}
