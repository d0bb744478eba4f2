import { generateKeyPairSync } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { drizzle } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { db } from '$lib/server/db/client';
import { env } from '$lib/server/env';
import { closePool } from '$lib/server/evaluation/pool';
import * as candidates from '$lib/server/revisions/candidates';
import { seal } from '$lib/server/revisions/digest';
import * as checkpoints from '$lib/server/signed-record/checkpoints';
import * as entries from '$lib/server/signed-record/entries';
import type { FaultKind } from '$lib/server/signed-record/fault';
import * as keys from '$lib/server/signed-record/keys';
import { consistencyProof, leafHash, treeRoot } from '$lib/server/signed-record/merkle';
import * as publication from '$lib/server/signed-record/publication';
import { entryBytes, entryHash, newKeyBytes } from '$lib/server/signed-record/statement';
import { verifyAll, verifyWithin, type Report } from '$lib/server/signed-record/verification';
import { createDatabase, type TestDatabase } from '../support/database';
import { check, edit, freeze, propose, seen, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';
import { extendsRecord, includes, readSigned } from '../support/transparency';

const folder = mkdtempSync(join(tmpdir(), 'halfdigit-record-'));
let database: TestDatabase;
let owner: pg.Client;
let cast: Cast;
let kept: string[];

beforeAll(async () => {
	database = await createDatabase();
	process.env.CHECKPOINT_FOLDER = join(folder, 'checkpoints');
	owner = new pg.Client({ connectionString: database.ownerUrl });
	await owner.connect();
	cast = await makeCast();
	const { id, number } = await writeNote(cast.author);
	await freeze(cast, number);
	await edit(cast.author, id, 1, '\nR_load = 1 Mohm');
	await freeze(cast, number);
	const other = await writeNote(cast.author, 'Another');
	await freeze(cast, other.number);
	const third = await writeNote(cast.author, 'A third');
	await propose(cast.author, third.number);
	kept = await checkpoints.readFolder(join(folder, 'checkpoints'));
}, 120_000);
afterAll(async () => {
	await closePool();
	await owner.end();
	await database.drop();
	rmSync(folder, { recursive: true, force: true });
});

const trustedKeys = () => [keys.read(env().SIGNING_KEY_FILE).id];
const verify = (): Promise<Report> => verifyAll({ trustedKeys: trustedKeys(), checkpoints: kept });
const kinds = ({ faults }: Report) => new Set(faults.map(({ kind }) => kind));

test('what nobody touched verifies, and the checkpoints of each approval are kept outside', async () => {
	const report = await verify();
	expect(report.faults).toEqual([]);
	// One key, three signatures and a seal per revision, and the signature of the open candidate.
	expect(report).toMatchObject({
		entries: 1 + 3 * 4 + 1,
		revisions: 3,
		candidates: 4,
		checkpoints: 3,
	});
	expect(kept.map((note) => checkpoints.parse(note).size)).toEqual([5, 9, 13]);
});

/** Does what only somebody with the owner's rights and no respect for its guards can do, verifies, and undoes it. */
async function tamper(...statements: string[]): Promise<Set<FaultKind>> {
	await owner.query('begin');
	try {
		for (const table of [
			'sign_off',
			'revision',
			'candidate',
			'signed_entry',
			'audit_event',
			'audit_link',
		]) {
			await owner.query(`alter table ${table} disable trigger user`);
		}
		for (const statement of statements) await owner.query(statement);
		const anchors = { trustedKeys: trustedKeys(), checkpoints: kept };
		return kinds(await verifyWithin(drizzle(owner), anchors));
	} finally {
		await owner.query('rollback');
	}
}

const signOffOf = (meaning: string, ordinal: number, number = 1) =>
	`(select s.id from sign_off s join candidate c on c.id = s.candidate_id join note n on n.id = c.note_id
		where s.meaning = '${meaning}' and c.ordinal = ${ordinal} and n.number = ${number})`;
const candidateOf = (ordinal: number, number = 1) =>
	`(select c.id from candidate c join note n on n.id = c.note_id where c.ordinal = ${ordinal} and n.number = ${number})`;

describe('the verifier names what was done', () => {
	const deeds: [FaultKind, string, string[]][] = [
		[
			'moved',
			'a signature that was given for one candidate and put under another of the note',
			[
				`delete from sign_off where id = ${signOffOf('checked', 2)}`,
				`update sign_off set candidate_id = ${candidateOf(2)} where id = ${signOffOf('checked', 1)}`,
			],
		],
		[
			'copied',
			'a signature that was copied to another candidate',
			[
				`insert into sign_off select gen_random_uuid(), ${candidateOf(1, 3)}, meaning, person_id, person_name, role,
					reason, method, digest, at, details, entry from sign_off where id = ${signOffOf('checked', 1)}`,
			],
		],
		[
			'swapped',
			'two revisions whose contents changed places',
			[
				`update revision set canonical = o.canonical, digest = o.digest from
					(select r.*, n.number from revision r join note n on n.id = r.note_id) o
					where o.letter <> revision.letter and o.note_id = revision.note_id`,
			],
		],
		[
			'swapped',
			'two signatures on a candidate that changed names',
			[
				`update sign_off set entry = case meaning when 'prepared' then (select entry from sign_off where id = ${signOffOf('checked', 1)})
					else (select entry from sign_off where id = ${signOffOf('prepared', 1)}) end
					where id in (${signOffOf('prepared', 1)}, ${signOffOf('checked', 1)})`,
			],
		],
		[
			'edited',
			'the name of a signer',
			[`update sign_off set person_name = 'Somebody Else' where id = ${signOffOf('approved', 1)}`],
		],
		[
			'edited',
			'a figure in a candidate',
			[
				`update candidate set results = jsonb_set(results, '{quantities,V_out,value}', '2.4') where id = ${candidateOf(1)}`,
			],
		],
		[
			'edited',
			'a byte of a revision',
			[
				`update revision set canonical = replace(canonical, 'Divider', 'Dividor') where letter = 'B'`,
			],
		],
		[
			'edited',
			'a statement of the record',
			[
				`update signed_entry set statement = replace(statement, 'Engineer', 'Engineen') where index = 2`,
			],
		],
		['deleted', 'a signature', [`delete from sign_off where id = ${signOffOf('checked', 1)}`]],
		['deleted', 'a revision', [`delete from revision where letter = 'B'`]],
		['deleted', 'an entry of the record', ['delete from signed_entry where index = 6']],
		[
			'reordered',
			'two entries of the record',
			[
				'update signed_entry set index = index + 1000 where index in (6, 7)',
				'update signed_entry set index = case index when 1006 then 7 else 6 end where index > 1000',
			],
		],
		[
			'truncated',
			'the end of the record, with all that it speaks of',
			[
				'delete from revision where entry > 9',
				'delete from sign_off where entry > 9',
				'delete from signed_entry where index > 9',
			],
		],
		[
			'deleted all',
			'the whole record',
			['delete from revision', 'delete from sign_off', 'delete from signed_entry'],
		],
		[
			'other document',
			'a revision that was put under another note',
			[
				`update revision set note_id = (select id from note where number = 3), letter = 'A' where letter = 'B'`,
			],
		],
		[
			'edited',
			'an entry of the audit trail',
			["update audit_event set action = 'x' where id = (select min(id) from audit_event)"],
		],
		[
			'deleted',
			'an entry of the audit trail',
			['delete from audit_event where id = (select min(id) from audit_event)'],
		],
		[
			'truncated',
			'the end of the audit trail',
			['delete from audit_event where id > 3', 'delete from audit_link where "position" > 3'],
		],
	];
	test.each(deeds)('%s: %s', async (kind, _, statements) => {
		const found = await tamper(...statements);
		expect([...found]).toContain(kind);
	});

	/** The record as somebody would write it anew who has all of it but the installation's key. */
	async function rewritten(from: number, key: keys.SigningKey): Promise<string[]> {
		const { rows } = await owner.query<{ index: string; kind: string; statement: string }>(
			'select index, kind, statement from signed_entry order by index',
		);
		let previous: string | null = null;
		const own = { id: key.id, publicKey: key.publicKey };
		return rows.flatMap(({ index, kind, statement }) => {
			const said = JSON.parse(statement) as object;
			const introduced = kind === 'key' ? { key: own, proof: key.sign(newKeyBytes(own)) } : {};
			const text = seal({ ...said, ...introduced, previous }).canonical;
			const signature = key.sign(entryBytes(text));
			previous = entryHash(text, key.id, signature);
			if (Number(index) < from) return [];
			const quoted = pg.escapeLiteral(text);
			return `update signed_entry set statement = ${quoted}, key_id = '${key.id}', signature = '${signature}', hash = '${previous}' where index = ${index}`;
		});
	}

	test('other key: the whole record written anew with a key of one’s own', async () => {
		const found = await tamper(...(await rewritten(0, keys.read(newKey('forger.pem')))));
		expect([...found]).toEqual(expect.arrayContaining(['other key', 'rewritten']));
	});

	test('other key: one entry signed with a key of one’s own', async () => {
		const key = keys.read(newKey('other.pem'));
		const one = (await rewritten(0, key)).filter((statement) => statement.endsWith('index = 7'));
		expect([...(await tamper(...one))]).toContain('other key');
	});

	test('rewritten: by somebody who has the installation’s key, because checkpoints are kept outside', async () => {
		const { rows } = await owner.query<{ index: string; statement: string }>(
			'select index, statement from signed_entry order by index',
		);
		const key = keys.read(env().SIGNING_KEY_FILE);
		let previous: string | null = null;
		const statements = rows.map(({ index, statement }) => {
			const said = { ...(JSON.parse(statement) as { time: string }), previous };
			if (index === '3') said.time = said.time.replace('Z', 'Z').replace(/^\d{4}/, '2020');
			const text = seal(said).canonical;
			const signature = key.sign(entryBytes(text));
			previous = entryHash(text, key.id, signature);
			return `update signed_entry set statement = ${pg.escapeLiteral(text)}, signature = '${signature}', hash = '${previous}' where index = ${index}`;
		});
		expect([...(await tamper(...statements))]).toContain('rewritten');
	});
});

function newKey(name: string): string {
	const file = join(folder, name);
	const { privateKey } = generateKeyPairSync('ed25519');
	writeFileSync(file, privateKey.export({ format: 'pem', type: 'pkcs8' }), { mode: 0o600 });
	return file;
}

/** Uses another key file for a while. */
async function withKey<T>(file: string, work: () => Promise<T>): Promise<T> {
	const before = env().SIGNING_KEY_FILE;
	env().SIGNING_KEY_FILE = file;
	try {
		return await work();
	} finally {
		env().SIGNING_KEY_FILE = before;
	}
}

test('somebody with two old checkpoints and the documentation proves what came between, and would see a fork', async () => {
	const { keys: known } = await publication.published();
	const key = known[0]?.publicKey ?? '';
	const [old, , newest] = kept.map((note) => readSigned(note, key));
	if (!old || !newest) throw new Error('a checkpoint is not signed');
	const proof = await publication.consistency(old.size, newest.size);
	expect(extendsRecord(proof, old.root, newest.root)).toBe(true);
	for (let index = 0; index < newest.size; index++) {
		expect(includes(await publication.inclusion(index, newest.size), newest.root)).toBe(true);
	}
	expect(readSigned((kept[0] ?? '').replace(/\n\d+\n/, '\n6\n'), key)).toBeUndefined();
	// A record that differs in one early entry has no proof that fits the checkpoint that was kept.
	const leaves = await Promise.all(
		Array.from({ length: newest.size }, (_, index) => publication.inclusion(index, newest.size)),
	);
	const forked = leaves.map(({ leaf }, index) => (index === 2 ? leafHash('another') : leaf));
	const claimed = { from: old.size, size: newest.size, proof: consistencyProof(forked, old.size) };
	expect(extendsRecord(claimed, old.root, treeRoot(forked))).toBe(false);
	await expect(publication.inclusion(0, 10_000)).rejects.toMatchObject({ code: 'notFound' });
});

describe('the key', () => {
	const refusals: [string, () => string, RegExp][] = [
		['is not named', () => '', /has no signing key/],
		['is missing', () => join(folder, 'nowhere.pem'), /is missing or cannot be read/],
		[
			'can be read by others',
			() => {
				const file = newKey('open.pem');
				writeFileSync(file, '', { flag: 'a' });
				return openToOthers(file);
			},
			/may be read by others/,
		],
		['is no key', () => written('text.pem', 'no key'), /no private key in PEM/],
		['is of another kind', () => written('rsa.pem', rsaKey()), /no Ed25519 key/],
		['is not the one of the record', () => newKey('unknown.pem'), /is not the one that its record/],
	];
	test.each(refusals)(
		'when it %s, nothing is signed and the page says why',
		async (_, file, why) => {
			const { number } = await writeNote(cast.author, 'Unsigned');
			await expect(withKey(file(), () => propose(cast.author, number))).rejects.toMatchObject({
				code: 'unavailable',
				message: expect.stringMatching(why) as string,
			});
			await expect(candidates.get(cast.author, number)).rejects.toMatchObject({ code: 'notFound' });
		},
	);

	test('gives way to another one: earlier signatures still hold, the new one signs, the old one no longer', async () => {
		const next = newKey('next.pem');
		await db().transaction((tx) => entries.rotate(tx, keys.read(next)));
		const { number } = await writeNote(cast.author, 'After the change');
		await expect(propose(cast.author, number)).rejects.toMatchObject({ code: 'unavailable' });
		await withKey(next, async () => {
			expect(await freeze(cast, number)).toBe('A');
			kept = await checkpoints.readFolder(join(folder, 'checkpoints'));
			expect((await verify()).faults).toEqual([]);
		});
		env().SIGNING_KEY_FILE = next;
		expect((await entries.keysOf(db())).map(({ id }) => id)).toHaveLength(2);
	});

	test('is nowhere in the database', async () => {
		const { rows } = await owner.query<{ dump: string }>(
			`select string_agg(query_to_xml(format('table %I', table_name), true, false, '')::text, '') as dump
				from information_schema.tables where table_schema = 'public' and table_type = 'BASE TABLE'`,
		);
		const key = keys.read(env().SIGNING_KEY_FILE);
		expect(rows[0]?.dump).toContain(key.publicKey);
		expect(rows[0]?.dump).not.toContain('PRIVATE KEY');
	});
});

test('a clock that was set back signs nothing, and says so', async () => {
	const { number } = await writeNote(cast.author, 'Early');
	await propose(cast.author, number);
	const open = await seen(cast.engineer, number);
	const clock = (back: string) =>
		owner.query(`create or replace function signing_time() returns timestamptz language sql volatile as
			$$ select clock_timestamp() - interval '${back}' $$`);
	await clock('1 hour');
	try {
		await expect(candidates.check(cast.engineer, number, open)).rejects.toMatchObject({
			code: 'unavailable',
			message: expect.stringMatching(/clock was set back: it says .*Nothing was signed/) as string,
		});
	} finally {
		await clock('0 hours');
	}
	await check(cast, number);
});

function written(name: string, text: string): string {
	const file = join(folder, name);
	writeFileSync(file, text, { mode: 0o600 });
	return file;
}

function openToOthers(file: string): string {
	const copy = `${file}.open`;
	writeFileSync(copy, 'x', { mode: 0o644 });
	return copy;
}

function rsaKey(): string {
	const { privateKey } = generateKeyPairSync('rsa', { modulusLength: 2048 });
	return privateKey.export({ format: 'pem', type: 'pkcs8' }) as string;
}
