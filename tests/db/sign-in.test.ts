import { createHash } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as passwords from '$lib/server/auth/passwords';
import * as sessions from '$lib/server/auth/sessions';
import { db } from '$lib/server/db/client';
import { person, session, signInAttempt } from '$lib/server/db/schema/people';
import { createDatabase, type TestDatabase } from '../support/database';
import { givePassword, makeMember, makeTeam, testPassword } from '../support/people';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor } from '../support/visitor';

let database: TestDatabase;
let server: SyncServer;
let team: Awaited<ReturnType<typeof makeTeam>>;
beforeAll(async () => {
	database = await createDatabase();
	server = await startSyncServer({ ROLES: 'web' });
	team = await makeTeam();
});
afterAll(async () => {
	await server.stop();
	await database.drop();
});

const newcomer = async () => givePassword(await makeMember(team, 'engineer'));
const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');
const tokenOf = (visitor: Visitor) => visitor.cookie?.split('=')[1] ?? '';
const sessionsOf = (personId: string) =>
	db().select().from(session).where(eq(session.userId, personId));

async function signedIn(email: string, password = testPassword): Promise<Visitor> {
	const visitor = new Visitor(server.port);
	const answer = await visitor.post('/sign-in', { email, password, to: '/notes' });
	expect([answer.status, answer.location]).toEqual([303, '/notes']);
	return visitor;
}

const lives = async (visitor: Visitor) => (await visitor.get('/notes')).status === 200;

/** The same browser with the cookie it had before. */
const again = (cookie: string | undefined) => new Visitor(server.port, cookie);

test('signing in makes a session row that holds the digest of the cookie’s token, and no more', async () => {
	const { email, personId } = await newcomer();
	const visitor = new Visitor(server.port);
	const answer = await visitor.post('/sign-in', { email, password: testPassword, to: '/notes' });
	expect(answer.cookies.join()).toMatch(
		/^halfdigit\.session=[\w-]{43}; Max-Age=604800; Path=\/; HttpOnly; SameSite=Lax$/,
	);
	const rows = await sessionsOf(personId);
	expect(rows.map((row) => row.sessionToken)).toEqual([sha256(tokenOf(visitor))]);
	expect(JSON.stringify(rows)).not.toContain(tokenOf(visitor));
	expect(await lives(visitor)).toBe(true);
});

test('each sign-in has a new token, whatever cookie the browser came with', async () => {
	const { email } = await newcomer();
	const visitor = await signedIn(email);
	const first = visitor.cookie;
	await visitor.post('/sign-in', { email, password: testPassword, to: '/notes' });
	expect(visitor.cookie).not.toBe(first);
	const planted = again(`halfdigit.session=${'A'.repeat(43)}`);
	await planted.post('/sign-in', { email, password: testPassword, to: '/notes' });
	expect(tokenOf(planted)).not.toBe('A'.repeat(43));
});

test('a wrong password and an unknown person get the same answer, and what was typed comes back', async () => {
	const { email } = await newcomer();
	const wrong = await again(undefined).post('/sign-in', {
		email,
		password: 'not this',
		to: '/team',
	});
	const unknown = await again(undefined).post('/sign-in', {
		email: 'nobody@example.test',
		password: 'not this',
		to: '/team',
	});
	expect([wrong.status, unknown.status]).toEqual([401, 401]);
	expect(wrong.body).toContain('The e-mail address or the password is wrong.');
	expect(wrong.body).toContain(email);
	expect(wrong.body).not.toContain('not this');
	const plain = (body: string, address: string) =>
		body.replaceAll(address, 'x').replace(/nonce="[^"]*"/g, '');
	expect(plain(wrong.body, email)).toBe(plain(unknown.body, 'nobody@example.test'));
	expect([...wrong.cookies, ...unknown.cookies]).toEqual([]);
});

test('verifying takes as long where there is no such person', async () => {
	const stored = await passwords.hash(testPassword);
	await passwords.verify(null, 'warm up');
	const taken: Record<'known' | 'unknown', number[]> = { known: [], unknown: [] };
	for (let round = 0; round < 25; round++) {
		for (const [who, hash] of [
			['known', stored],
			['unknown', null],
		] as const) {
			const from = performance.now();
			await passwords.verify(hash, 'not this');
			taken[who].push(performance.now() - from);
		}
	}
	const median = (times: number[]) => times.sort((a, b) => a - b)[12]!;
	const ratio = median(taken.unknown) / median(taken.known);
	expect(ratio).toBeGreaterThan(0.5);
	expect(ratio).toBeLessThan(2);
});

test('passwords are kept as argon2id with 19 MiB and two passes', async () => {
	const { personId } = await newcomer();
	const [row] = await db().select().from(person).where(eq(person.id, personId));
	expect(row?.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
});

test('signing in leads back to where one came from, and never to another site', async () => {
	const { email } = await newcomer();
	const asked = await again(undefined).get('/notes?state=frozen&sort=title');
	expect(asked.location).toBe('/sign-in?to=%2Fnotes%3Fstate%3Dfrozen%26sort%3Dtitle');
	for (const [to, expected] of [
		['/notes?state=frozen', '/notes?state=frozen'],
		['//evil.example/', '/notes'],
		['/\\evil.example', '/notes'],
		['https://evil.example/', '/notes'],
		['javascript:alert(1)', '/notes'],
		['/\t/evil.example', '/notes'],
		['', '/notes'],
	] as const) {
		const answer = await again(undefined).post('/sign-in', { email, password: testPassword, to });
		expect([answer.status, answer.location], to).toEqual([303, expected]);
	}
});

test('signing out ends this session and no other', async () => {
	const { email } = await newcomer();
	const [here, there] = [await signedIn(email), await signedIn(email)];
	const cookie = here.cookie;
	expect((await here.post('/sign-out', {})).status).toBe(303);
	expect(here.cookie).toBeUndefined();
	expect(await lives(again(cookie))).toBe(false);
	expect(await lives(there)).toBe(true);
});

test('signing out everywhere ends every session', async () => {
	const { email, personId } = await newcomer();
	const [here, there] = [await signedIn(email), await signedIn(email)];
	const cookie = here.cookie;
	await here.post('/account?/signOutEverywhere', {});
	expect(await lives(again(cookie))).toBe(false);
	expect(await lives(there)).toBe(false);
	expect(await sessionsOf(personId)).toEqual([]);
});

test('a changed password ends every session but the one that is opened then', async () => {
	const { email, personId } = await newcomer();
	const [here, there] = [await signedIn(email), await signedIn(email)];
	const before = here.cookie;
	const next = 'a longer secret of 7 words';
	const answer = await here.post('/account?/password', { present: testPassword, next });
	expect(answer.status).toBe(200);
	expect(here.cookie).not.toBe(before);
	expect([await lives(again(before)), await lives(there), await lives(here)]).toEqual([
		false,
		false,
		true,
	]);
	expect(await sessionsOf(personId)).toHaveLength(1);
	const old = await again(undefined).post('/sign-in', { email, password: testPassword, to: '' });
	expect(old.status).toBe(401);
	await signedIn(email, next);
});

test('a new password is neither short nor among those that are tried first, and the present one is asked', async () => {
	const { email } = await newcomer();
	const visitor = await signedIn(email);
	for (const [present, next, sentence] of [
		[testPassword, 'seven77', 'A password has 8 characters or more.'],
		[testPassword, 'Password1', 'is on the lists'],
		[testPassword, 'qwertyuiop', 'is on the lists'],
		['not this', 'a longer secret of 7 words', 'The password is wrong.'],
	] as const) {
		const answer = await visitor.post('/account?/password', { present, next });
		expect(answer.status).toBeGreaterThanOrEqual(400);
		expect(answer.body).toContain(sentence);
		expect(answer.body).not.toContain(next);
	}
	await signedIn(email);
});

test('a session ends when it was not used for 7 days, and after 30 days however much it is used', async () => {
	const { email, personId } = await newcomer();
	const idle = await signedIn(email);
	const day = 86_400_000;
	const [fresh] = await sessionsOf(personId);
	expect(Math.round((fresh!.expires.getTime() - Date.now()) / day)).toBe(7);
	expect(Math.round((fresh!.endsAt.getTime() - Date.now()) / day)).toBe(30);

	const set = (change: Partial<typeof session.$inferInsert>) =>
		db().update(session).set(change).where(eq(session.userId, personId));
	await set({ expires: new Date(Date.now() + 2 * day) });
	expect(await lives(idle)).toBe(true);
	const [prolonged] = await sessionsOf(personId);
	expect(Math.round((prolonged!.expires.getTime() - Date.now()) / day)).toBe(7);

	const cookie = idle.cookie;
	await set({ expires: new Date(Date.now() - 1000) });
	expect(await lives(again(cookie))).toBe(false);
	await set({ expires: new Date(Date.now() + 2 * day), endsAt: new Date(Date.now() - 1000) });
	expect(await lives(again(cookie))).toBe(false);
});

test('a person who left the team has no session any more', async () => {
	const { email, personId } = await newcomer();
	const visitor = await signedIn(email);
	await db().execute(sql`delete from membership where person_id = ${personId}`);
	expect(await lives(visitor)).toBe(false);
	const answer = await again(undefined).post('/sign-in', { email, password: testPassword, to: '' });
	expect(answer.status).toBe(403);
	expect(answer.body).toContain('belongs to no team');
});

test('too many wrong tries are answered with the time to wait, and the right password counts after it', async () => {
	const { email } = await newcomer();
	await db()
		.insert(signInAttempt)
		.values(Array.from({ length: 10 }, () => ({ email, address: '127.0.0.1', succeeded: false })));
	const early = await again(undefined).post('/sign-in', { email, password: testPassword, to: '' });
	expect(early.status).toBe(429);
	expect(early.body).toMatch(/Too many tries\. Wait (3[012]|2\d) seconds, then try again\./);
	await db()
		.update(signInAttempt)
		.set({ at: sql`at - interval '33 seconds'` })
		.where(eq(signInAttempt.email, email));
	await signedIn(email);
});

test('the account page lists the sessions and says which one this is', async () => {
	const actor = await newcomer();
	const [here, there] = [await signedIn(actor.email), await signedIn(actor.email)];
	const listed = await sessions.list(actor, tokenOf(here));
	expect(listed.map((one) => one.current)).toEqual([false, true]);
	const page = await here.get('/account');
	expect(page.status).toBe(200);
	for (const visitor of [here, there]) {
		expect(page.body).not.toContain(tokenOf(visitor));
		expect(page.body).not.toContain(sha256(tokenOf(visitor)));
	}
});

test('a database that cannot be reached is named as the reason, and what was typed comes back', async () => {
	const cut = await startSyncServer({
		ROLES: 'web',
		DATABASE_URL: 'postgresql://nobody@127.0.0.1:1/nothing',
	});
	try {
		const visitor = new Visitor(cut.port);
		const fields = { email: 'robin@example.test', password: testPassword, to: '/notes' };
		const answer = await visitor.post('/sign-in', fields);
		expect(answer.status).toBe(503);
		expect(answer.body).toContain('The database cannot be reached just now.');
		expect(answer.body).toContain('robin@example.test');
		expect(answer.body).not.toMatch(/ECONNREFUSED|select|127\.0\.0\.1:1/);
		visitor.cookie = `halfdigit.session=${'A'.repeat(43)}`;
		expect((await visitor.get('/notes')).status).toBe(503);
		expect((await visitor.get('/api/notes/MN-001/review')).status).toBe(503);
		expect(visitor.cookie).toBe(`halfdigit.session=${'A'.repeat(43)}`);
	} finally {
		await cut.stop();
	}
});
