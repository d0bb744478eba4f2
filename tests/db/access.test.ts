import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import * as apiTokens from '$lib/server/auth/api-tokens';
import { db } from '$lib/server/db/client';
import { team } from '$lib/server/db/schema/people';
import { closePool } from '$lib/server/evaluation/pool';
import { createDatabase, type TestDatabase } from '../support/database';
import { givePassword, makeCast, makeMember, signIn, type Cast } from '../support/people';
import { answeredRoutes } from '../support/routes';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor, type Answer } from '../support/visitor';
import { secretTitle, stage, type Scene } from '../support/world';
import { accessTable, visitors, type Visitor as Who } from './access-table';

let database: TestDatabase;
let server: SyncServer;
let cast: Cast;
let others: Cast;
beforeAll(async () => {
	database = await createDatabase();
	server = await startSyncServer({ ROLES: 'web' });
	cast = await makeCast('Kestrel Bench');
	others = await makeCast('Other Bench');
	// Numbers that no note of the other team has.
	await db().update(team).set({ nextNoteNumber: 500 }).where(eq(team.id, cast.author.teamId));
});
afterAll(async () => {
	await server.stop();
	await closePool();
	await database.drop();
});

/** A person of the kind that visits, new where the visit may change who they are. */
async function arrive(
	who: Who,
	script = false,
): Promise<{ visitor: Visitor; actor: Cast[keyof Cast] }> {
	// An earlier visit may have changed it.
	await givePassword(cast.author);
	if (who === 'stranger') return { visitor: new Visitor(server.port), actor: cast.engineer };
	if (who === 'author')
		return { visitor: await visitorOf(cast.author, script), actor: cast.author };
	const role = who === 'outsider' ? 'approver' : who;
	const actor = await givePassword(
		await makeMember(who === 'outsider' ? others.author : cast.author, role),
	);
	return { visitor: await visitorOf(actor, script), actor };
}

async function visitorOf(actor: Cast[keyof Cast], script: boolean): Promise<Visitor> {
	if (!script) return new Visitor(server.port, await signIn(actor));
	const { token } = await apiTokens.create(actor, { name: 'Script', days: 1 });
	return new Visitor(server.port, undefined, token);
}

const looked = new Map<string, Promise<Scene>>();

/** A note at the stage a route asks for: a new one for each deed, one for all who only look. */
function sceneFor(route: string, actor: Cast[keyof Cast]): Promise<Scene> {
	const upTo = accessTable[route]?.stage ?? 'draft';
	if (!route.startsWith('GET ')) return stage(cast, upTo, actor);
	const scene = looked.get(upTo) ?? stage(cast, upTo, actor);
	looked.set(upTo, scene);
	return scene;
}

async function visit(visitor: Visitor, route: string, scene: Scene): Promise<Answer> {
	const row = accessTable[route]!;
	const [method = '', address = ''] = route.split(' ');
	const path = row.at?.(scene) ?? address;
	if (row.json) return visitor.json(method, path, row.json(scene));
	if (row.form) return visitor.post(path, row.form(scene));
	return visitor.get(path, { accept: 'text/html' });
}

test('every route and action has a row in the table of who may do what, and no row is left over', () => {
	expect(Object.keys(accessTable).sort()).toEqual(answeredRoutes());
});

describe.each(Object.keys(accessTable))('%s', (route) => {
	test.each(visitors)('%s', async (who) => {
		const row = accessTable[route]!;
		const { visitor, actor } = await arrive(who, row.script);
		const scene = await sceneFor(route, actor);
		const answer = await visit(visitor, route, scene);
		expect(answer.status, answer.body).toBe(row.expect[who] ?? row.expect.all);
		if (who === 'stranger' && answer.status === 303 && route !== 'POST /sign-in') {
			expect(answer.location).toMatch(/^\/sign-in/);
		}
		if (who === 'stranger' || who === 'outsider') {
			expect(answer.body).not.toContain(secretTitle);
			expect(answer.location ?? '').not.toContain('/revisions/');
		}
	});
});

test('a note of another team and one that does not exist give the same answer', async () => {
	const scene = await stage(cast, 'frozen', cast.engineer);
	const { visitor } = await arrive('outsider');
	const plain = (answer: Answer, number: string) => ({
		status: answer.status,
		body: answer.body.replaceAll(number, 'MN-000').replace(/nonce="[^"]*"/g, ''),
	});
	for (const tail of ['', '/candidate', '/revisions/A']) {
		const foreign = await visitor.get(`/notes/${scene.number}${tail}`);
		const none = await visitor.get(`/notes/MN-990${tail}`);
		expect(plain(foreign, scene.number)).toEqual(plain(none, 'MN-990'));
		const data = tail === '' ? '/__data.json' : `${tail}/__data.json`;
		const foreignData = await visitor.get(`/notes/${scene.number}${data}`);
		const noData = await visitor.get(`/notes/MN-990${data}`);
		expect(plain(foreignData, scene.number)).toEqual(plain(noData, 'MN-990'));
	}
	const script = (await arrive('outsider', true)).visitor;
	expect(plain(await script.get(`/api/v1/notes/${scene.number}`), scene.number)).toEqual(
		plain(await script.get('/api/v1/notes/MN-990'), 'MN-990'),
	);
	for (const tail of ['threads', 'review']) {
		const foreign = await visitor.get(`/api/notes/${scene.number}/${tail}`);
		const none = await visitor.get(`/api/notes/MN-990/${tail}`);
		expect(plain(foreign, scene.number)).toEqual(plain(none, 'MN-990'));
	}
});

test('a thread is not reached through another note', async () => {
	const first = await stage(cast, 'draft', cast.engineer);
	const second = await stage(cast, 'draft', cast.engineer);
	const { visitor } = await arrive('engineer');
	const path = `/api/notes/${first.number}/threads/${second.threadId}`;
	expect((await visitor.json('PATCH', path, { closed: true })).status).toBe(404);
	expect((await visitor.json('POST', `${path}/comments`, { body: 'Hm.' })).status).toBe(404);
});

test('readers are sent to the newest frozen revision and see nothing that is younger', async () => {
	const scene = await stage(cast, 'frozen', cast.engineer);
	const hidden = await stage(cast, 'proposed', cast.engineer);
	const { visitor } = await arrive('reader');
	const answer = await visitor.get(`/notes/${scene.number}`);
	expect([answer.status, answer.location]).toEqual([303, `/notes/${scene.number}/revisions/A`]);
	const list = await visitor.get('/notes');
	expect(list.body).toContain(scene.number);
	expect(list.body).not.toContain(hidden.number);
	expect((await visitor.get(`/notes/${hidden.number}/revisions/A`)).status).toBe(404);
});

test('every answer carries the headers that keep it from being framed or guessed at', async () => {
	const { visitor } = await arrive('engineer');
	for (const path of [
		'/notes',
		'/healthz',
		'/handbook/proof',
		'/no-such-page',
		'/api/notes/MN-990/threads',
		'/api/v1/notes/MN-990',
		'/',
	]) {
		const { headers } = await visitor.get(path);
		expect(headers['x-content-type-options'], path).toBe('nosniff');
		expect(headers['referrer-policy'], path).toBe('same-origin');
		expect(headers['content-security-policy'], path).toContain("frame-ancestors 'none'");
		expect(headers['content-security-policy'], path).not.toMatch(/script-src[^;]*unsafe/);
	}
});
