import { createHash } from 'node:crypto';
import { AppError } from '$lib/errors';
import canonicalize from 'canonicalize';

/** RFC 8785 JSON of a value and the SHA-256 of its UTF-8, hexadecimal. */
export function seal(value: unknown): { canonical: string; digest: string } {
	const canonical = canonicalize(value);
	if (canonical === undefined) throw new AppError('invalid', 'This cannot be written as JSON.');
	return { canonical, digest: createHash('sha256').update(canonical, 'utf8').digest('hex') };
}
