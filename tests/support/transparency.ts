import { createHash, createPublicKey, verify } from 'node:crypto';

/**
 * A verifier of checkpoints and proofs, written from RFC 9162 (2.1.3.2, 2.1.4.2) and the signed-note format alone; it
 * shares nothing with the product.
 */
const sha256 = (...parts: Buffer[]) => createHash('sha256').update(Buffer.concat(parts)).digest();
const node = (left: Buffer, right: Buffer) => sha256(Buffer.of(1), left, right);
const hex = (text: string) => Buffer.from(text, 'hex');

/** Whether the proof leads from the leaf to the root. */
export function includes(
	{ index, size, leaf, proof }: { index: number; size: number; leaf: string; proof: string[] },
	root: string,
): boolean {
	if (index >= size) return false;
	let [fn, sn] = [index, size - 1];
	let hash = hex(leaf);
	for (const step of proof) {
		if (sn === 0) return false;
		if (fn % 2 === 1 || fn === sn) {
			hash = node(hex(step), hash);
			while (fn % 2 === 0 && fn !== 0) [fn, sn] = [fn >> 1, sn >> 1];
		} else hash = node(hash, hex(step));
		[fn, sn] = [fn >> 1, sn >> 1];
	}
	return sn === 0 && hash.equals(hex(root));
}

/** Whether the proof shows that the record of the second root begins with that of the first. */
export function extendsRecord(
	{ from, size, proof }: { from: number; size: number; proof: string[] },
	first: string,
	second: string,
): boolean {
	if (from === size) return proof.length === 0 && first === second;
	if (from === 0) return proof.length === 0;
	const isPower = (from & (from - 1)) === 0;
	const [start, ...steps] = isPower ? [first, ...proof] : proof;
	if (start === undefined) return false;
	let [fn, sn] = [from - 1, size - 1];
	while (fn % 2 === 1) [fn, sn] = [fn >> 1, sn >> 1];
	let [old, now] = [hex(start), hex(start)];
	for (const step of steps) {
		if (sn === 0) return false;
		if (fn % 2 === 1 || fn === sn) {
			old = node(hex(step), old);
			now = node(hex(step), now);
			while (fn % 2 === 0 && fn !== 0) [fn, sn] = [fn >> 1, sn >> 1];
		} else now = node(now, hex(step));
		[fn, sn] = [fn >> 1, sn >> 1];
	}
	return sn === 0 && old.equals(hex(first)) && now.equals(hex(second));
}

/** Size and root of a checkpoint; undefined where the key did not sign it. */
export function readSigned(
	note: string,
	publicKey: string,
): { size: number; root: string } | undefined {
	const cut = note.indexOf('\n\n') + 1;
	const text = Buffer.from(note.slice(0, cut), 'utf8');
	const [origin = '', size = '', root = ''] = text.toString('utf8').split('\n');
	const [dash, name, base64 = ''] = note
		.slice(cut + 1)
		.trimEnd()
		.split(' ');
	const blob = Buffer.from(base64, 'base64');
	const der = Buffer.from(publicKey, 'base64');
	const hint = sha256(Buffer.from(`${origin}\n`), Buffer.of(1), der.subarray(12)).subarray(0, 4);
	const key = createPublicKey({ key: der, format: 'der', type: 'spki' });
	const signed = verify(null, text, key, blob.subarray(4));
	if (dash !== '—' || name !== origin || !blob.subarray(0, 4).equals(hint) || !signed)
		return undefined;
	return { size: Number(size), root: Buffer.from(root, 'base64').toString('hex') };
}
