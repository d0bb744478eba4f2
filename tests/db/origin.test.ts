import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { db } from '$lib/server/db/client';
import { env } from '$lib/server/env';
import { closePool } from '$lib/server/evaluation/pool';
import { createDatabase, type TestDatabase } from '../support/database';
import { makeCast, signIn, testPassword, type Cast } from '../support/people';
import { answeredRoutes } from '../support/routes';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor } from '../support/visitor';
import { stage, type Scene } from '../support/world';
import { accessTable } from './access-table';

let database: TestDatabase;
let server: SyncServer;
let cast: Cast;
let scene: Scene;
let cookie: string;
beforeAll(async () => {
	database = await createDatabase();
	server = await startSyncServer({ ROLES: 'web' });
	cast = await makeCast();
	scene = await stage(cast, 'proposed', cast.engineer);
	cookie = await signIn(cast.engineer);
});
afterAll(async () => {
	await server.stop();
	await closePool();
	await database.drop();
});

const origins = {
	'another site': 'https://evil.example',
	'a name that begins alike': 'http://localhost:4173.evil.example',
	'a subdomain': 'http://app.localhost:4173',
	'another port': 'http://localhost:4174',
	'another scheme': 'https://localhost:4173',
	null: 'null',
	none: undefined,
};

const contentTypes = [
	'application/x-www-form-urlencoded',
	'multipart/form-data; boundary=x',
	'text/plain',
	'application/json',
	'application/octet-stream',
];

/** Everything a refused request could have changed. */
async function everything(): Promise<unknown> {
	const { rows } = await db().execute(sql`
		select (select count(*) from audit_event) as events, (select count(*) from session) as sessions,
			(select count(*) from sign_in_attempt) as tries, (select count(*) from comment) as comments`);
	return rows[0];
}

// What scripts ask is refused for want of a token, wherever it comes from.
const changing = answeredRoutes().filter(
	(route) => !route.startsWith('GET ') && !accessTable[route]?.script,
);

/** A mailbox's own button to stop mail posts without an origin (RFC 8058); the token in the address is all that counts. */
const mayLackOrigin = 'POST /mail/stop';

test('what may come without an origin does nothing without its token, and nothing else with it', async () => {
	const before = await everything();
	const visitor = new Visitor(server.port);
	for (const token of ['', 'x', `${scene.stopToken}x`]) {
		const answer = await visitor.send('POST', `/mail/stop?token=${token}`, {
			body: 'List-Unsubscribe=One-Click',
			headers: { 'content-type': 'application/x-www-form-urlencoded' },
		});
		expect(answer.body).toContain('"type":"failure","status":404');
		expect(answer.cookies.join()).not.toContain('session');
	}
	expect(await everything()).toEqual(before);
});

describe.each(changing)('%s', (route) => {
	const refused = Object.entries(origins).filter(
		([, from]) => from !== undefined || route !== mayLackOrigin,
	);
	test.each(refused)('is refused from %s, whatever it says it sends', async (_, from) => {
		const before = await everything();
		const row = accessTable[route]!;
		const [method = '', address = ''] = route.split(' ');
		for (const contentType of contentTypes) {
			const fields = row.form?.(scene) ?? (row.json?.(scene) as Record<string, string>);
			const body =
				contentType === 'application/json'
					? JSON.stringify(fields)
					: new URLSearchParams(fields).toString();
			const answer = await new Visitor(server.port, cookie).send(
				method,
				row.at?.(scene) ?? address,
				{
					body,
					headers: { 'content-type': contentType, ...(from !== undefined && { origin: from }) },
				},
			);
			expect(answer.status, `${contentType}: ${answer.body}`).toBe(403);
			expect(answer.cookies).toEqual([]);
		}
		expect(await everything()).toEqual(before);
	});
});

test('headers that a proxy would set change neither cookie nor address', async () => {
	const spoofed = {
		host: 'evil.example',
		'x-forwarded-host': 'evil.example',
		'x-forwarded-proto': 'https',
		'x-forwarded-port': '444',
		forwarded: 'host=evil.example;proto=https',
		'x-original-url': '/team',
	};
	const fields = { email: cast.engineer.email, password: testPassword, to: '/notes' };
	const plain = await new Visitor(server.port).post('/sign-in', fields);
	const visitor = new Visitor(server.port);
	const answer = await visitor.post('/sign-in', fields, spoofed);
	expect([answer.status, answer.location]).toEqual([303, '/notes']);
	const shape = (set: string[]) =>
		set.map((one) => one.replace(/=[^;]+/, '=…').replace(/Expires=[^;]+/, ''));
	expect(shape(answer.cookies)).toEqual(shape(plain.cookies));
	for (const path of ['/notes', '/account', '/', '/auth/session', '/auth/signin', '/auth/csrf']) {
		const seen = await visitor.get(path, spoofed);
		expect(JSON.stringify(seen)).not.toContain('evil.example');
	}
	expect((await visitor.get('/notes', { ...spoofed, host: 'a:b:c' })).status).toBe(200);
	const foreign = { ...spoofed, origin: 'http://evil.example' };
	expect((await visitor.post('/sign-out', {}, foreign)).status).toBe(403);
	expect(env().ORIGIN).toBe('http://localhost:4173');
});
