import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import type { Cell } from '$lib/calc/results';
import type { Actor } from '$lib/server/auth/access';
import * as apiTokens from '$lib/server/auth/api-tokens';
import { db } from '$lib/server/db/client';
import { apiToken } from '$lib/server/db/schema/tokens';
import { closePool } from '$lib/server/evaluation/pool';
import * as store from '$lib/server/evaluation/store';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, propose, writeNote } from '../support/note-life';
import { makeCast, makeMember, signIn, type Cast } from '../support/people';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor, type Answer } from '../support/visitor';

let database: TestDatabase;
let server: SyncServer;
let cast: Cast;
beforeAll(async () => {
	database = await createDatabase();
	server = await startSyncServer({ ROLES: 'web' });
	cast = await makeCast();
});
afterAll(async () => {
	await server.stop();
	await closePool();
	await database.drop();
});

const tokenFor = async (actor: Actor) => apiTokens.create(actor, { name: 'Bench script', days: 1 });
const scriptOf = async (actor: Actor) =>
	new Visitor(server.port, undefined, (await tokenFor(actor)).token);
/** Somebody whose requests nobody else's count against. */
const freshScript = async () => scriptOf(await makeMember(cast.engineer, 'engineer'));

const path = '/api/v1/evaluate';
const type = { 'content-type': 'application/json' };
/** Posts a body as a script does: no cookie, no origin. */
const post = (script: Visitor, body: unknown, headers: Record<string, string> = {}) =>
	script.send('POST', path, {
		body: typeof body === 'string' ? body : JSON.stringify(body),
		headers: { ...type, ...headers },
	});
/** An answer, with what some of them hold. */
const read = (answer: Answer) =>
	JSON.parse(answer.body) as {
		message: string;
		faults?: object[];
		state: string;
		seq: number;
		cells: object[];
		options: object;
		results: { quantities: object };
	};
const plain = (value: unknown) => JSON.parse(JSON.stringify(value)) as unknown;

const divider: Cell[] = [
	{ id: 't1', kind: 'text', source: 'The divider gives {{V_out}}.' },
	{ id: 'c1', kind: 'calculation', source: 'V_in = 10 V\nV_out = V_in / 4 # loaded' },
	{ id: 'q1', kind: 'requirement', source: 'V_out <= 3 V\n2 A < 3 V' },
];
const small = { cells: [{ id: 'c1', kind: 'calculation', source: 'x = 1 V' }] };

describe('POST /api/v1/evaluate', () => {
	test('answers in the documented shape', async () => {
		const answer = await post(await freshScript(), { cells: divider });
		expect([answer.status, answer.headers['content-type']]).toEqual([200, 'application/json']);
		expect(read(answer)).toMatchObject({
			engine: expect.stringMatching(/^\d+\.\d+\.\d+$/) as string,
			quantities: {
				V_out: {
					cell: 'c1',
					line: 2,
					unit: 'V',
					value: 2.5,
					text: '2.5\u00a0V',
					description: 'loaded',
					dependsOn: ['V_in'],
				},
			},
			requirements: [
				{ cell: 'q1', line: 1, verdict: 'met', margin: 0.5, unit: 'V', probability: 1 },
			],
			errors: [
				{
					cell: 'q1',
					line: 2,
					from: expect.any(Number) as number,
					to: expect.any(Number) as number,
					code: 'dimension',
					message: expect.any(String) as string,
				},
			],
		});
	});

	test('gives what the engine gives, with budgets and worst cases unless told otherwise', async () => {
		const script = await freshScript();
		const cells: Cell[] = [
			{ id: 'c1', kind: 'calculation', source: 'R = tolerance(100 kohm, 1 %)\nG = 1 / R' },
			{ id: 'q1', kind: 'requirement', source: 'R <= 100.5 kohm' },
		];
		const asked = [
			[undefined, { ...defaultOptions, detail: 'all' }],
			[{ detail: [] }, { ...defaultOptions, detail: [] }],
			[
				{ coverage: 0.99, decisionRule: 'simple', detail: ['G'] },
				{ coverage: 0.99, decisionRule: 'simple', detail: ['G'] },
			],
		] as const;
		for (const [options, meant] of asked) {
			const answer = await post(script, { cells, ...(options && { options }) });
			expect(answer.status, answer.body).toBe(200);
			const results = evaluate(cells, meant as never);
			expect(read(answer)).toEqual(plain(results));
		}
	});

	test('passes columns of readings and curves on to the engine', async () => {
		const cells: Cell[] = [
			{
				id: 'r1',
				kind: 'readings',
				columns: [
					{ name: 'raw', unit: '1', values: [12, 409, 801] },
					{ name: 'level', unit: 'm', values: [0, 1, 2], uncertainties: [0.01, 0.01, 0.01] },
				],
			},
			{ id: 'k1', kind: 'curve', name: 'line', x: 'raw', y: 'level', degree: 1, weighted: true },
		];
		const answer = await post(await freshScript(), { cells });
		expect(answer.status, answer.body).toBe(200);
		expect(read(answer)).toEqual(plain(evaluate(cells, { ...defaultOptions, detail: 'all' })));
	});

	test('computes the same for every role and writes nothing down but the use', async () => {
		const bodies = new Set<string>();
		for (const who of [cast.reader, cast.engineer, cast.approver, cast.administrator])
			bodies.add((await post(await scriptOf(who), { cells: divider })).body);
		expect(bodies.size).toBe(1);
	});

	test.each([
		['no JSON at all', '{"cells": [', 'The body is no JSON'],
		['nothing', '', 'The body is no JSON'],
		['brackets without end', '['.repeat(100_000), 'The body is no JSON'],
		['null', null, 'body: '],
		['no cells', {}, 'cells: '],
		['a field nobody knows', { ...small, cell: 1 }, 'cell: is not known here'],
		['a prototype', '{"cells": [], "__proto__": {"x": 1}}', '__proto__: is not known here'],
		['a kind nobody knows', { cells: [{ id: 'a', kind: 'picture' }] }, 'cells[0].kind: '],
		['no source', { cells: [...divider, { id: 'x', kind: 'text' }] }, 'cells[3].source: '],
		[
			'an id with a blank',
			{ cells: [{ id: 'a b', kind: 'text', source: '' }] },
			'cells[0].id: has 1 to 40 letters',
		],
		['an id twice', { cells: [divider[0], divider[0]] }, 'cells[1].id: is the id of an earlier'],
		[
			'a reading that is no number',
			{
				cells: [
					{ id: 'r', kind: 'readings', columns: [{ name: 'a', unit: 'V', values: [1, '2'] }] },
				],
			},
			'cells[0].columns[0].values[1]: must be a number',
		],
		[
			'a reading that is not finite',
			'{"cells":[{"id":"r","kind":"readings","columns":[{"name":"a","unit":"V","values":[1e999]}]}]}',
			'cells[0].columns[0].values[0]: must be a number',
		],
		[
			'a curve without degree',
			{ cells: [{ id: 'k', kind: 'curve', name: 'f', x: 'a', y: 'b' }] },
			'cells[0].degree: ',
		],
		['a coverage of 95', { ...small, options: { coverage: 95 } }, 'options.coverage: is below 1'],
		['a rule nobody knows', { ...small, options: { decisionRule: 'x' } }, 'options.decisionRule: '],
		[
			'too many trials',
			{ ...small, options: { monteCarlo: { quantities: ['x'], trials: 10_000_001 } } },
			'options.monteCarlo.trials: is at most 10 000 000',
		],
		[
			'too few trials',
			{ ...small, options: { monteCarlo: { quantities: ['x'], trials: 999 } } },
			'options.monteCarlo.trials: is at least 1 000',
		],
		[
			'trials of too many quantities',
			{ ...small, options: { monteCarlo: { quantities: Array(21).fill('x') } } },
			'options.monteCarlo.quantities: names at most 20',
		],
	])('refuses %s and says where', async (_, body, sentence) => {
		const answer = await post(await freshScript(), body);
		expect(answer.status, answer.body).toBe(400);
		const { message, faults } = read(answer);
		expect(message).toContain(sentence);
		const place = /^(\S+): /.exec(sentence)?.[1];
		if (place) expect(faults).toContainEqual({ place, message: expect.any(String) as string });
	});

	test('names twenty faults of a body with many, and counts the others', async () => {
		const answer = await post(await freshScript(), { cells: Array(30).fill(1) });
		const { message, faults } = read(answer);
		expect(faults).toHaveLength(20);
		expect(message).toMatch(/And 10 more\.$/);
	});

	test('wants JSON to be called so', async () => {
		const headers = { 'content-type': 'application/octet-stream' };
		const answer = await post(await freshScript(), small, headers);
		expect([answer.status, answer.body]).toEqual([400, expect.stringContaining('content-type')]);
	});

	test.each([500_001, 600_000])(
		'refuses a body of %i bytes, and takes the next one',
		async (size) => {
			const script = await freshScript();
			const body = JSON.stringify(small).padEnd(size);
			const refused = await post(script, body);
			expect([refused.status, read(refused)]).toEqual([
				413,
				{ message: 'The body has at most 500 kB.' },
			]);
			expect((await post(script, body.slice(0, 500_000))).status).toBe(200);
		},
	);

	test('refuses a body that does not say how long it is once it is too long', async () => {
		const { token } = await tokenFor(cast.engineer);
		const pieces = Array.from({ length: 30 }, () => new TextEncoder().encode(' '.repeat(50_000)));
		const answer = await fetch(`http://127.0.0.1:${server.port}${path}`, {
			method: 'POST',
			headers: { ...type, authorization: `Bearer ${token}` },
			body: new ReadableStream({
				pull(controller) {
					const piece = pieces.pop();
					if (piece) controller.enqueue(piece);
					else controller.close();
				},
			}),
			duplex: 'half',
		} as RequestInit);
		expect(answer.status).toBe(413);
	});

	test('takes the next request of a connection after one whose body was refused unread', async () => {
		const stranger = new Visitor(server.port, undefined, `hd_${'A'.repeat(43)}`);
		const body = JSON.stringify(small).padEnd(450_000);
		const statuses = [];
		for (let i = 0; i < 3; i++) statuses.push((await post(stranger, body)).status);
		const script = await freshScript();
		for (const contentType of ['text/csv', 'application/json'])
			statuses.push((await post(script, body, { 'content-type': contentType })).status);
		expect(statuses).toEqual([401, 401, 401, 400, 200]);
	});

	test('tells a script that asks too fast how long to wait', async () => {
		const script = await freshScript();
		const answers = await Promise.all(Array.from({ length: 400 }, () => post(script, small)));
		const statuses = new Set(answers.map((answer) => answer.status));
		expect(statuses).toEqual(new Set([200, 429]));
		const early = answers.find((answer) => answer.status === 429)!;
		expect(early.headers['retry-after']).toMatch(/^[1-9]\d*$/);
		expect(early.body).toContain('Your scripts ask');
		expect((await post(await freshScript(), small)).status).toBe(200);
	});
});

describe('GET /api/v1/notes/[number]', () => {
	const get = (script: Visitor, number: string) => script.get(`/api/v1/notes/${number}`);

	test('gives the working copy at its newest sequence number', async () => {
		const { id, number } = await writeNote(cast.author, 'Level input');
		const script = await freshScript();
		const { seq, content, results } = await store.current(id);
		expect(read(await get(script, number))).toEqual({
			number,
			title: 'Level input',
			state: 'draft',
			revision: null,
			seq,
			cells: content.cells,
			options: defaultOptions,
			results: plain(results),
		});
		await edit(cast.author, id, 1, '\nI_in = 2 mA');
		const later = read(await get(script, number));
		expect(later.seq).toBe(seq + 1);
		expect(later.results.quantities).toHaveProperty('I_in');
		await propose(cast.author, number);
		expect(read(await get(script, number)).state).toBe('in check');
	});

	test('gives cells and options that can be sent back to be computed', async () => {
		const { number } = await writeNote(cast.author);
		const script = await freshScript();
		const { cells, options, results } = read(await get(script, number));
		const answer = await post(script, { cells, options: { ...options, detail: [] } });
		expect(read(answer)).toEqual(results);
	});

	test('gives readers the last frozen revision and nothing younger', async () => {
		const { id, number } = await writeNote(cast.author, 'Level input');
		const script = await scriptOf(cast.reader);
		expect((await get(script, number)).status).toBe(404);
		await freeze(cast, number);
		const frozen = await store.current(id);
		await edit(cast.author, id, 1, '\nI_in = 2 mA');
		const answer = await get(script, number);
		expect(read(answer)).toEqual({
			number,
			title: 'Level input',
			state: 'frozen',
			revision: 'A',
			seq: frozen.seq,
			cells: frozen.content.cells,
			options: defaultOptions,
			results: plain(frozen.results),
		});
		const working = read(await get(await scriptOf(cast.engineer), number));
		expect(working).toMatchObject({ state: 'draft', revision: 'A', seq: frozen.seq + 1 });
	});

	test('says in JSON where there is no such note or address', async () => {
		const script = await freshScript();
		for (const address of ['notes/MN-990', 'notes/mn-1', 'notes', 'nothing']) {
			const answer = await script.get(`/api/v1/${address}`);
			expect(answer.status, address).toBe(404);
			expect(read(answer)).toEqual({
				message: expect.stringMatching(/^There is no such/) as string,
			});
		}
	});
});

describe.each([
	['POST', '/api/v1/evaluate'],
	['GET', '/api/v1/notes/MN-001'],
])('%s %s', (method, address) => {
	const ask = (visitor: Visitor, headers: Record<string, string> = {}) =>
		visitor.send(method, address, {
			...(method === 'POST' && { body: JSON.stringify(small) }),
			headers: { ...type, ...headers },
		});
	const refused = (answer: Answer, challenge: string) => {
		expect(answer.status, answer.body).toBe(401);
		expect(answer.headers['www-authenticate']).toBe(challenge);
		expect(read(answer)).toEqual({ message: expect.stringContaining('token') as string });
	};
	const realm = 'Bearer realm="Halfdigit"';

	test('asks for a token, which a session does not replace', async () => {
		const origin = { origin: 'http://localhost:4173' };
		refused(await ask(new Visitor(server.port)), realm);
		refused(await ask(new Visitor(server.port, await signIn(cast.engineer)), origin), realm);
		for (const authorization of ['Bearer', 'Basic aGE6bGY=', 'bearer ', 'hd_abc'])
			refused(await ask(new Visitor(server.port), { authorization }), realm);
	});

	test('refuses a token that is unknown, revoked or expired, whatever session comes with it', async () => {
		const invalid = `${realm}, error="invalid_token"`;
		const unknown = `hd_${'A'.repeat(43)}`;
		refused(await ask(new Visitor(server.port, undefined, unknown)), invalid);
		const revoked = await tokenFor(cast.engineer);
		await apiTokens.revoke(cast.engineer, revoked.id);
		const expired = await tokenFor(cast.engineer);
		await db()
			.update(apiToken)
			.set({ expiresAt: sql`now() - interval '1 second'` })
			.where(eq(apiToken.id, expired.id));
		const cookie = await signIn(cast.engineer);
		for (const { token } of [revoked, expired]) {
			refused(await ask(new Visitor(server.port, undefined, token)), invalid);
			refused(await ask(new Visitor(server.port, cookie, token)), invalid);
		}
	});

	test('looks at no origin and lets no other site read', async () => {
		await writeNote(cast.author);
		const script = await freshScript();
		for (const origin of [undefined, 'null', 'https://evil.example']) {
			const answer = await ask(script, origin === undefined ? {} : { origin });
			expect(answer.status, answer.body).toBe(200);
			expect(answer.headers['access-control-allow-origin']).toBeUndefined();
			expect(answer.headers['cache-control']).toBe('private, no-cache');
			expect(answer.cookies).toEqual([]);
		}
	});

	test('says so in JSON where the database cannot be reached', async () => {
		const url = 'postgresql://nobody@127.0.0.1:1/nothing';
		const cut = await startSyncServer({ ROLES: 'web', DATABASE_URL: url });
		try {
			const answer = await ask(new Visitor(cut.port, undefined, `hd_${'A'.repeat(43)}`));
			expect(answer.status).toBe(503);
			expect(read(answer).message).toContain('The database cannot be reached');
		} finally {
			await cut.stop();
		}
	});
});

test('a token opens no page and no route of the pages', async () => {
	const { number } = await writeNote(cast.author);
	const script = await freshScript();
	expect((await script.get('/notes')).location).toMatch(/^\/sign-in/);
	expect((await script.get(`/api/notes/${number}/review`)).status).toBe(401);
	expect((await script.post('/account?/signOutEverywhere', {})).location).toMatch(/^\/sign-in/);
});
