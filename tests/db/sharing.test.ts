import pg from 'pg';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { closePool } from '$lib/server/evaluation/pool';
import { download } from '$lib/server/revisions/sealed-file';
import * as revisions from '$lib/server/revisions/revisions';
import { withdraw } from '$lib/server/revisions/withdraw';
import * as links from '$lib/server/sharing/links';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, writeNote } from '../support/note-life';
import { makeCast, signIn, testPassword as password, type Cast } from '../support/people';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor, type Answer } from '../support/visitor';

let database: TestDatabase;
let owner: pg.Client;
let server: SyncServer;
let cast: Cast;
let others: Cast;
let note: { id: string; number: string };
let stranger: Visitor;

beforeAll(async () => {
	database = await createDatabase();
	owner = new pg.Client({ connectionString: database.ownerUrl });
	await owner.connect();
	server = await startSyncServer({ ROLES: 'web' });
	cast = await makeCast('Kestrel Bench');
	others = await makeCast('Other Bench');
	note = await writeNote(cast.author, 'Kestrel divider');
	await freeze(cast, note.number);
});
beforeEach(() => {
	stranger = new Visitor(server.port);
});
afterAll(async () => {
	await server.stop();
	await closePool();
	await owner.end();
	await database.drop();
});

const plain = { name: 'The buyers', days: 30, password: '' };
const share = (said: Partial<typeof plain> & { days?: number | null } = {}) =>
	links.create(cast.engineer, note.number, 'A', { ...plain, ...said });
const listed = async (id: string) =>
	(await links.list(cast.author, note.number, 'A')).find((one) => one.id === id);
const pathOf = ({ token }: { token: string }) => `/shared/${token}`;
const digest = async (letter = 'A') =>
	(await revisions.get(cast.author, note.number, letter)).revision.digest;

describe('a link', () => {
	test('shows one frozen revision to a stranger, without scripts, and its files', async () => {
		const made = await share();
		expect(await listed(made.id)).toMatchObject({
			name: 'The buyers',
			madeBy: 'Engineer Example',
			state: 'open',
			hasPassword: false,
			lastUsedAt: null,
		});
		const page = await stranger.get(pathOf(made));
		expect(page.status).toBe(200);
		expect(page.body).toContain('Kestrel divider');
		expect(page.body).toContain('is the newest one');
		expect(page.body).not.toMatch(/<script|href="\/notes/);
		expect(page.headers).toMatchObject({
			'cache-control': 'no-store',
			'x-robots-tag': expect.stringContaining('noindex') as string,
			'referrer-policy': 'same-origin',
		});
		const file = await stranger.get(`${pathOf(made)}/file`);
		expect(file.body).toBe(await download(cast.author, note.number, 'A'));
		const pdf = await stranger.get(`${pathOf(made)}/pdf`);
		expect([pdf.status, pdf.headers['content-type']]).toEqual([200, 'application/pdf']);
		expect(pdf.body.slice(0, 8)).toBe('%PDF-1.7');
		for (const { headers } of [file, pdf]) expect(headers['cache-control']).toBe('no-store');
		expect((await listed(made.id))?.lastUsedAt).not.toBeNull();
	});

	test('is kept as a hash, shown once on the page that made it, and named in the audit trail without its token', async () => {
		const engineer = new Visitor(server.port, await signIn(cast.engineer));
		const address = `/notes/${note.number}/revisions/A`;
		const form = { name: 'Auditors', days: '7', password: '' };
		const { status, body } = await engineer.post(`${address}?/share`, form);
		expect(status).toBe(200);
		const token = /\/shared\/([\w-]{43})/.exec(body)?.[1] ?? '';
		expect((await stranger.get(`/shared/${token}`)).status).toBe(200);
		expect((await engineer.get(address)).body).not.toContain(token);
		const { rows } = await owner.query<{ all: string }>(
			`select (select string_agg(t::text, ' ') from shared_link t) || (select string_agg(t::text, ' ') from audit_event t) as all`,
		);
		expect(rows[0]?.all).toContain('Auditors');
		expect(rows[0]?.all).not.toContain(token);
	});

	test('that is wrong, expired or revoked gives the same answer, for page and files', async () => {
		const expired = await share();
		await owner.query(
			`update shared_link set expires_at = now() - interval '1 second' where id = $1`,
			[expired.id],
		);
		const revoked = await share();
		expect(await links.revoke(cast.author, note.number, 'A', revoked.id)).toBe('The buyers');
		const tokens = ['A'.repeat(43), expired.token, revoked.token];
		for (const tail of ['', '/pdf', '/file']) {
			const answers: string[] = [];
			for (const token of tokens) {
				const { status, body } = await stranger.get(`/shared/${token}${tail}`);
				expect(status).toBe(404);
				answers.push(body.replaceAll(token, '').replace(/nonce="[^"]*"/g, ''));
			}
			expect(new Set(answers).size).toBe(1);
		}
		expect((await stranger.get('/shared/short')).status).toBe(404);
		expect((await listed(expired.id))?.state).toBe('expired');
		expect((await listed(revoked.id))?.state).toBe('revoked');
		await expect(links.revoke(cast.author, note.number, 'A', revoked.id)).rejects.toMatchObject({
			code: 'notFound',
		});
	});

	test('asks for its password where it has one, and tries are slowed down', async () => {
		const made = await share({ password });
		const other = await share({ password });
		const give = (said: string) => stranger.post(`${pathOf(made)}?/unlock`, { password: said });
		const locked = await stranger.get(pathOf(made));
		expect(locked.status).toBe(200);
		expect(locked.body).not.toContain('Kestrel');
		expect((await stranger.get(`${pathOf(made)}/pdf`)).status).toBe(403);
		expect((await stranger.get(`${pathOf(made)}/file`)).status).toBe(403);
		const wrong = await give('not this one');
		expect(wrong.status).toBe(403);
		expect(wrong.body).not.toContain('Kestrel');
		const right = await give(password);
		expect([right.status, right.location]).toEqual([303, pathOf(made)]);
		const cookie = right.cookies.find((one) => one.startsWith('halfdigit.shared=')) ?? '';
		expect(cookie).toMatch(/HttpOnly/);
		expect(cookie).toContain(`Path=${pathOf(made)}`);
		const opened = new Visitor(server.port, cookie.split(';', 1)[0]);
		expect((await opened.get(pathOf(made))).body).toContain('Kestrel divider');
		expect((await opened.get(`${pathOf(made)}/file`)).status).toBe(200);
		// The proof is one link's own, and nobody can make it last longer.
		expect((await opened.get(pathOf(other))).body).not.toContain('Kestrel');
		const [name = '', proof = ''] = cookie.split(';', 1)[0]!.split('=');
		const later = `${name}=${Number(proof.split('.')[0]) + 1}.${proof.split('.')[1]}`;
		expect((await new Visitor(server.port, later).get(pathOf(made))).body).not.toContain('Kestrel');
		const answers: Answer[] = [];
		for (let i = 0; i < 7; i++) answers.push(await give('not this one'));
		expect(answers.at(-1)?.status).toBe(429);
		expect(answers.at(-1)?.body).toMatch(/Too many tries/);
	});
});

test('only engineers and up of the team make, see and revoke links', async () => {
	const { number } = note;
	const made = await share();
	for (const actor of [cast.reader]) {
		await expect(links.create(actor, number, 'A', plain)).rejects.toMatchObject({
			code: 'forbidden',
		});
		await expect(links.list(actor, number, 'A')).rejects.toMatchObject({ code: 'forbidden' });
		await expect(links.revoke(actor, number, 'A', made.id)).rejects.toMatchObject({
			code: 'forbidden',
		});
	}
	for (const actor of [others.engineer, others.administrator]) {
		await expect(links.create(actor, number, 'A', plain)).rejects.toMatchObject({
			code: 'notFound',
		});
		await expect(links.list(actor, number, 'A')).rejects.toMatchObject({ code: 'notFound' });
		await expect(links.revoke(actor, number, 'A', made.id)).rejects.toMatchObject({
			code: 'notFound',
		});
	}
	const foreign = await writeNote(others.author, 'Plover');
	await freeze(others, foreign.number);
	await expect(links.revoke(others.engineer, foreign.number, 'A', made.id)).rejects.toMatchObject({
		code: 'notFound',
	});
	for (const actor of [cast.engineer, cast.approver, cast.administrator]) {
		const own = await links.create(actor, number, 'A', { ...plain, days: null });
		expect((await listed(own.id))?.expiresAt).toBeNull();
		await links.revoke(actor, number, 'A', own.id);
	}
	await expect(links.create(cast.author, number, 'Z', plain)).rejects.toMatchObject({
		code: 'notFound',
	});
});

test('link and code say when the revision is superseded and withdrawn, and tell nothing of the new one', async () => {
	const first = await share();
	const code = async (letter: string) =>
		(await stranger.get(`/r/${(await digest(letter)).slice(0, 32)}`)).body;
	expect(await code('A')).toContain('Valid and current');
	expect(await code('A')).not.toMatch(/Kestrel|V_out|<script/);
	await edit(cast.author, note.id, 1, '\nR_secret = 1 Mohm');
	await freeze(cast, note.number);
	const superseded = await stranger.get(pathOf(first));
	expect(superseded.body).toContain('revision B is the');
	expect(superseded.body).not.toMatch(/R_secret|The load is in it now/);
	expect(await code('A')).toMatch(/superseded[^]*The current revision is B/);
	const second = await links.create(cast.author, note.number, 'B', plain);
	await withdraw(cast.approver, note.number, 'B', {
		password,
		digest: await digest('B'),
		reason: 'The reference drifts.',
	});
	const withdrawn = (await stranger.get(pathOf(second))).body;
	expect(withdrawn).toMatch(/Withdrawn\.[^]*The reference drifts\./);
	expect(await code('B')).toContain('withdrawn');
	for (const digits of ['0'.repeat(32), 'short', '%25'.repeat(10)]) {
		const { status, body } = await stranger.get(`/r/${digits}`);
		expect([status, body.includes('Unknown')]).toEqual([200, true]);
	}
});
