import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { closePool } from '$lib/server/evaluation/pool';
import { download } from '$lib/server/revisions/sealed-file';
import * as revisions from '$lib/server/revisions/revisions';
import { withdraw } from '$lib/server/revisions/withdraw';
import * as dropped from '$lib/server/signed-record/dropped';
import { published } from '$lib/server/signed-record/publication';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, writeNote } from '../support/note-life';
import { makeCast, testPassword as password, type Cast } from '../support/people';

const folder = mkdtempSync(join(tmpdir(), 'halfdigit-verify-'));
let database: TestDatabase;
let cast: Cast;
let number: string;
let first: string;
let second: string;

beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
	const note = await writeNote(cast.author);
	number = note.number;
	await freeze(cast, number);
	first = await download(cast.reader, number, 'A');
	await edit(cast.author, note.id, 1, '\nR_load = 1 Mohm');
	await freeze(cast, number);
	second = await download(cast.reader, number, 'B');
	writeFileSync(join(folder, 'keys.json'), JSON.stringify(await published()));
});
afterAll(async () => {
	await closePool();
	await database.drop();
	rmSync(folder, { recursive: true, force: true });
});

const verified = (text: string) => dropped.file(Buffer.from(text));

/** What the script for the command line says, with the public keys alone. */
function script(text: string | Buffer): { genuine: boolean; said: string } {
	const file = join(folder, 'revision.json');
	writeFileSync(file, text);
	const { status, stdout } = spawnSync(
		process.execPath,
		['server/verify-revision.mjs', file, join(folder, 'keys.json')],
		{ encoding: 'utf8', env: {} },
	);
	return { genuine: status === 0, said: stdout };
}

test('a file as it was downloaded is valid and current, or superseded, with its signers', async () => {
	const digest = (await revisions.get(cast.reader, number, 'B')).revision.digest;
	expect(await verified(second)).toMatchObject({
		state: 'valid',
		faults: [],
		revision: { number, letter: 'B', digest },
		signers: [
			{ meaning: 'prepared', name: 'Author Example' },
			{ meaning: 'checked', name: 'Engineer Example' },
			{ meaning: 'approved', name: 'Approver Example' },
		],
	});
	expect(await verified(first)).toMatchObject({ state: 'superseded', revision: { letter: 'A' } });
	expect(await dropped.file(gzipSync(second))).toMatchObject({ state: 'valid' });
	expect(script(second).genuine).toBe(true);
	expect(script(second).said).toMatch(/approved: Approver Example, \d{4}-.*Z/);
	expect(script(gzipSync(first)).genuine).toBe(true);
});

test('a digest is found as it is printed, and nothing is told that the paper does not say', async () => {
	const { digest } = (await revisions.get(cast.reader, number, 'B')).revision;
	const printed = `SHA-256 ${digest.toUpperCase().match(/.{8}/g)!.join(' ')}`;
	const outcome = await dropped.digest(printed);
	expect(outcome).toMatchObject({ state: 'valid', revision: { number, letter: 'B' } });
	expect(JSON.stringify(outcome)).not.toMatch(/Divider|V_out|Test Bench/);
	expect(await dropped.digest('0'.repeat(64))).toEqual({
		state: 'unknown',
		faults: [],
		revision: null,
		signers: [],
		withdrawn: null,
	});
	await expect(dropped.digest('7b9c')).rejects.toMatchObject({ code: 'invalid' });
});

test('wherever one byte is altered, page and script refuse it', async () => {
	const step = Math.max(1, Math.floor(second.length / 60));
	for (let at = 0; at < second.length; at += step) {
		const byte = second.charCodeAt(at) === 0x61 ? 'b' : 'a';
		const altered = second.slice(0, at) + byte + second.slice(at + 1);
		const { state } = await verified(altered);
		expect(['altered', 'unknown'], `byte ${at}: ${state}`).toContain(state);
		if (at % (step * 12) === 0) expect(script(altered).genuine, `byte ${at}`).toBe(false);
	}
	for (const altered of [`${second}\n`, second.slice(0, -1), ` ${second}`, '{}', 'null', '[]']) {
		expect(await verified(altered)).toMatchObject({ state: 'altered', revision: null });
		expect(script(altered).genuine).toBe(false);
	}
});

test('parts of two files put together are refused, and so is a signature left out', async () => {
	type File = { revision: { signatures: unknown[] }; seal: unknown };
	const [a, b] = [JSON.parse(first) as File, JSON.parse(second) as File];
	const written = (file: unknown) => JSON.stringify(file);
	const forged = [
		{ ...b, seal: a.seal },
		{ ...b, revision: { ...b.revision, signatures: a.revision.signatures } },
		{ ...b, revision: { ...b.revision, signatures: b.revision.signatures.slice(1) } },
	];
	for (const file of forged) {
		expect((await verified(written(file))).state).toBe('altered');
		expect(script(written(file)).genuine).toBe(false);
	}
});

test('what is no revision is answered with a sentence', async () => {
	await expect(dropped.file(Buffer.from('%PDF-1.7\n'))).rejects.toMatchObject({
		code: 'invalid',
		message: expect.stringMatching(/^This PDF carries no revision/) as string,
	});
	await expect(dropped.file(Buffer.alloc(0))).rejects.toMatchObject({ code: 'invalid' });
	await expect(dropped.file(Buffer.of(0x1f, 0x8b, 1, 2))).rejects.toMatchObject({
		code: 'invalid',
	});
	// What unpacks to more than a revision can be.
	await expect(dropped.file(gzipSync(Buffer.alloc(40_000_000)))).rejects.toMatchObject({
		code: 'invalid',
	});
});

test('a revision that was withdrawn says so wherever it is shown, with the reason', async () => {
	const { digest } = (await revisions.get(cast.reader, number, 'B')).revision;
	const said = { password, digest, reason: 'The reference drifts.' };
	await expect(withdraw(cast.engineer, number, 'B', said)).rejects.toMatchObject({
		code: 'forbidden',
	});
	await expect(withdraw(cast.approver, number, 'A', said)).rejects.toMatchObject({
		message: 'Revision B supersedes it already.',
	});
	await withdraw(cast.approver, number, 'B', said);
	await expect(withdraw(cast.second, number, 'B', said)).rejects.toMatchObject({
		message: 'Approver Example withdrew it already.',
	});
	expect(await verified(second)).toMatchObject({
		state: 'withdrawn',
		withdrawn: { name: 'Approver Example', reason: 'The reference drifts.' },
	});
	expect(await dropped.digest(digest)).toMatchObject({ state: 'withdrawn' });
	expect((await revisions.get(cast.reader, number, 'B')).revision.withdrawn).toMatchObject({
		reason: 'The reference drifts.',
	});
	expect(await download(cast.reader, number, 'B')).toBe(second);
});
