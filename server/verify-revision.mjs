#!/usr/bin/env node
// Verifies the JSON file of a frozen revision, or the one that is attached to its PDF, with the installation's public keys
// alone: no network, no database, nothing but Node.js. Written from "What a sealed revision is" in DEVELOPERS.md; it shares
// no code with the product.
//
//   node server/verify-revision.mjs MN-014-B.json keys.json
//   node server/verify-revision.mjs MN-014-B.pdf keys.json
//
// keys.json comes from the installation's /verify/keys; get it on another way than the file, once. Ends with 0 where the
// file is genuine, with 1 where it is not.
import { createHash, createPublicKey, verify } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { gunzipSync, inflateSync } from 'node:zlib';

/** @typedef {{ keyId: string, signature: string, statement: any }} Signed */

const [, , revisionFile, keysFile] = process.argv;
if (!revisionFile || !keysFile) {
	process.stderr.write(
		'Usage: node server/verify-revision.mjs REVISION.json|REVISION.pdf KEYS.json\n',
	);
	process.exit(2);
}

/** Most bytes of a record. */
const maxBytes = 32_000_000;
let isPdf = false;

/** @type {string[]} */
const faults = [];
try {
	const bytes = readFileSync(revisionFile);
	const plain = bytes[0] === 0x1f && bytes[1] === 0x8b ? gunzipSync(bytes) : bytes;
	isPdf = plain.subarray(0, 1024).includes('%PDF-');
	const text = isPdf ? attachedTo(plain) : plain.toString('utf8');
	const keys = new Map(
		JSON.parse(readFileSync(keysFile, 'utf8')).keys.map(
			(/** @type {{ id: string, publicKey: string }} */ { id, publicKey }) => [id, publicKey],
		),
	);
	report(JSON.parse(text), text, keys);
} catch (error) {
	faults.push(error instanceof Error ? error.message : String(error));
}
for (const fault of faults) process.stdout.write(`${fault}\n`);
process.stdout.write(
	faults.length === 0
		? `Genuine${isPdf ? ': the record attached to the PDF. What its pages show is not proven by this' : ''}. Whether it is still the current revision, the installation knows: /verify.\n`
		: 'ALTERED or not sealed by these keys. Do not rely on it.\n',
);
process.exitCode = faults.length === 0 ? 0 : 1;

/**
 * The one sealed record attached to a PDF (ISO 32000-1, 7.11.4), plain or deflated.
 * @param {Buffer} pdf
 */
function attachedTo(pdf) {
	/** @type {Set<string>} */
	const records = new Set();
	let left = maxBytes;
	for (let at = pdf.indexOf('/EmbeddedFile'), tries = 0; at >= 0 && tries < 1000; tries += 1) {
		const before = Math.max(0, at - 2000);
		const from = before + pdf.subarray(before, at).lastIndexOf('obj');
		const text = from < before ? '' : pdf.toString('latin1', from, at + 2000);
		const found = /^obj((?:(?!endobj)[^])*?)\bstream\r?\n/.exec(text);
		const [head = '', dictionary = ''] = found ?? [];
		if (/\/EmbeddedFile(?![A-Za-z])/.test(dictionary)) {
			const start = from + head.length;
			const length = /\/Length\s+(\d+)(?!\s+\d+\s+R)/.exec(dictionary)?.[1];
			const content = pdf.subarray(start, length ? start + Number(length) : undefined);
			const bytes = /\/Filter/.test(dictionary)
				? inflated(content, left)
				: content.subarray(0, left);
			left -= bytes.length;
			const record = bytes.toString('utf8');
			if (record.startsWith('{"format":"halfdigit-sealed-revision-1"')) records.add(record);
			if (left <= 0) break;
		}
		at = pdf.indexOf('/EmbeddedFile', at + 1);
	}
	const [record] = records;
	if (record === undefined) throw new Error('This PDF carries no revision that can be read.');
	if (records.size > 1) throw new Error('This PDF carries more than one record.');
	return record;
}

/**
 * @param {Buffer} bytes
 * @param {number} most
 */
function inflated(bytes, most) {
	try {
		return inflateSync(bytes, { maxOutputLength: Math.max(1, most) });
	} catch {
		return Buffer.alloc(0);
	}
}

/**
 * @param {any} file
 * @param {string} text
 * @param {Map<string, string>} keys
 */
function report(file, text, keys) {
	if (file.format !== 'halfdigit-sealed-revision-1') throw new Error('This is no sealed revision.');
	if (canonical(file) !== text) faults.push('It was written anew.');
	const { revision, seal } = file;
	const digest = sha256(canonical(revision));
	if (seal.statement.contentHash !== digest) faults.push('Its content is not what was sealed.');
	if (seal.statement.kind !== 'freeze') faults.push('Its seal is a signature for something else.');
	if (sha256(canonical(revision.proposal)) !== revision.candidate) {
		faults.push('Its content is not the candidate that was signed.');
	}
	check(seal, 'The seal', revision, digest, keys);
	for (const one of revision.signatures) {
		const what = `The signature "${one.statement.meaning}" of ${one.statement.signer.name}`;
		check(one, what, revision, revision.candidate, keys);
	}
	for (const meaning of ['prepared', 'checked', 'approved']) {
		const found = revision.signatures.some(
			(/** @type {Signed} */ { statement }) => statement.meaning === meaning,
		);
		if (!found) faults.push(`It has no signature "${meaning}".`);
	}
	const { title } = revision.proposal.content;
	process.stdout.write(`${revision.note.number}, revision ${revision.letter}: ${title}\n`);
	process.stdout.write(`sha-256 ${digest}\n`);
	for (const { statement } of revision.signatures) {
		process.stdout.write(`${statement.meaning}: ${statement.signer.name}, ${statement.time}\n`);
	}
}

/**
 * @param {Signed} signed
 * @param {string} what
 * @param {any} revision
 * @param {string} contentHash
 * @param {Map<string, string>} keys
 */
function check({ statement, keyId, signature }, what, revision, contentHash, keys) {
	const publicKey = keys.get(keyId);
	if (publicKey === undefined) {
		faults.push(`${what} is made with another key (${keyId}).`);
		return;
	}
	const der = Buffer.from(publicKey, 'base64');
	if (sha256(der).slice(0, 16) !== keyId) faults.push(`Key ${keyId} does not have this name.`);
	const key = createPublicKey({ key: der, format: 'der', type: 'spki' });
	const bytes = Buffer.from(`halfdigit signed entry 1\n${canonical(statement)}`, 'utf8');
	if (!verify(null, bytes, key, Buffer.from(signature, 'base64'))) {
		faults.push(`${what} is not genuine.`);
	}
	if (statement.contentHash !== contentHash) faults.push(`${what} was given for something else.`);
	const { note, number } = statement.document;
	if (note !== revision.note.id || number !== revision.note.number) {
		faults.push(`${what} belongs to another document (${number}).`);
	}
	if (statement.revision !== revision.letter) faults.push(`${what} belongs to another revision.`);
}

/**
 * JSON in the canonical form of RFC 8785: names in the order of their UTF-16 code units, numbers and strings as
 * ECMAScript writes them, no white space.
 * @param {any} value
 * @returns {string}
 */
function canonical(value) {
	if (value === null || typeof value !== 'object') return JSON.stringify(value);
	if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`;
	const members = Object.keys(value)
		.sort()
		.map((name) => `${JSON.stringify(name)}:${canonical(value[name])}`);
	return `{${members.join(',')}}`;
}

/** @param {string | Buffer} data */
function sha256(data) {
	return createHash('sha256').update(data).digest('hex');
}
