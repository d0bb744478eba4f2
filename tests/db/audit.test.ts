import { createHash } from 'node:crypto';
import { asc, gt, sql } from 'drizzle-orm';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import * as audit from '$lib/server/audit/audit';
import * as trail from '$lib/server/audit/trail';
import { db } from '$lib/server/db/client';
import { auditEvent } from '$lib/server/db/schema/review';
import { closePool } from '$lib/server/evaluation/pool';
import { checkAudit } from '$lib/server/signed-record/check-audit';
import { createDatabase, type TestDatabase } from '../support/database';
import { makeCast, makeMember, givePassword, signIn, type Cast } from '../support/people';
import { answeredRoutes } from '../support/routes';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor } from '../support/visitor';
import { stage } from '../support/world';
import { accessTable, visitors } from './access-table';

let database: TestDatabase;
let owner: pg.Client;
let server: SyncServer;
let cast: Cast;
beforeAll(async () => {
	database = await createDatabase();
	owner = new pg.Client({ connectionString: database.ownerUrl });
	await owner.connect();
	server = await startSyncServer({ ROLES: 'web' });
	cast = await makeCast('Audited Bench');
});
afterAll(async () => {
	await server.stop();
	await closePool();
	await owner.end();
	await database.drop();
});

/** These compute or verify and change nothing. */
const changeNothing = [
	'POST /api/notes/[number]/trial',
	'POST /api/notes/[number]/trials',
	'POST /verify',
	'POST /shared/[token]?/unlock',
];
const changing = answeredRoutes().filter(
	(route) =>
		!route.startsWith('GET ') && !accessTable[route]?.script && !changeNothing.includes(route),
);

/** Everything a deed may change; what is counted of tries and kept of computing is no deed. */
const tables = [
	...[
		'note',
		'thread',
		'comment',
		'kept_trial',
		'mail',
		'mail_preference',
		'candidate',
		'sign_off',
		'revision',
		'withdrawal',
		'membership',
	],
	...[
		'person',
		'session',
		'api_token',
		'sign_off_policy',
		'shared_link',
		'signed_entry',
		'checkpoint',
		'team',
	],
];
async function everything(): Promise<unknown> {
	const parts = tables.map(
		(table) =>
			`(select md5(coalesce(string_agg(t::text, '' order by t::text), '')) from ${table} t) as ${table}`,
	);
	return (await owner.query(`select ${parts.join(', ')}`)).rows[0];
}

const newest = async () => {
	const { rows } = await db().execute<{ id: string }>(
		sql`select coalesce(max(id), 0)::text as id from audit_event`,
	);
	return Number(rows[0]?.id);
};

describe.each(changing)('%s', (route) => {
	test('leaves one entry in the audit trail, and is not done where it cannot', async () => {
		const row = accessTable[route]!;
		const allowed = visitors.find(
			(one) => one !== 'stranger' && (row.expect[one] ?? row.expect.all) < 400,
		);
		await givePassword(cast.author);
		const role =
			allowed === 'outsider' || allowed === 'author' ? 'approver' : (allowed ?? 'reader');
		const actor =
			allowed === 'author' || role === 'stranger'
				? cast.author
				: await givePassword(await makeMember(cast.author, role));
		const scene = await stage(cast, row.stage ?? 'draft', actor);
		const [method = '', address = ''] = route.split(' ');
		const path = row.at?.(scene) ?? address;
		const visit = async () => {
			const visitor = new Visitor(server.port, await signIn(actor));
			const before = { newest: await newest(), everything: await everything() };
			const answer = row.json
				? await visitor.json(method, path, row.json(scene))
				: await visitor.post(path, row.form?.(scene) ?? {});
			const entries = await db()
				.select()
				.from(auditEvent)
				.where(gt(auditEvent.id, before.newest))
				.orderBy(asc(auditEvent.id));
			return { answer, entries, before: before.everything };
		};
		await owner.query('alter table audit_event add constraint full_up check (false) not valid');
		try {
			const { answer, entries, before } = await visit();
			expect(answer.status).toBe(500);
			expect(entries).toEqual([]);
			expect(await everything()).toEqual(before);
		} finally {
			await owner.query('alter table audit_event drop constraint full_up');
		}
		const { answer, entries } = await visit();
		expect(answer.status, answer.body).toBeLessThan(400);
		expect(entries.map(({ action }) => action)).toHaveLength(1);
		expect(entries[0]).toMatchObject({ personId: actor.personId, teamId: actor.teamId });
		expect(JSON.stringify(entries)).not.toMatch(/plaice/);
	});
});

test('the trail is exported as a table and as lines, whose chain can be recomputed, for administrators only', async () => {
	await expect(trail.asLines(cast.approver)).rejects.toMatchObject({ code: 'forbidden' });
	await expect(trail.asTable(cast.approver)).rejects.toMatchObject({ code: 'forbidden' });
	await audit.record(db(), cast.author, 'tried', 'note:1', {
		before: { a: 1 },
		after: { text: '=cmd, "x"\n' },
		reason: '=1+1',
	});
	const lines = (await trail.asLines(cast.administrator)).trimEnd().split('\n');
	const parsed = lines.map((line) => JSON.parse(line) as { position: number; hash: string });
	expect(parsed.length).toBeGreaterThan(20);
	// Only this team's people did anything here, so that the chain is whole.
	let before = '';
	for (const [index, { position, hash }] of parsed.entries()) {
		expect(position).toBe(index + 1);
		const text = /"event":(.*)\}$/.exec(lines[index] ?? '')?.[1] ?? '';
		expect(
			createHash('sha256')
				.update(before + text)
				.digest('hex'),
		).toBe(hash);
		before = hash;
	}
	const table = await trail.asTable(cast.administrator);
	expect(table.split('\r\n')[0]).toBe(
		'"id","when (UTC)","who","what","to what","before","after","why"',
	);
	expect(table).toContain(`"Author Example","tried","note:1","{""a"":1}"`);
	// Nothing that a spreadsheet would take for a formula.
	expect(table).toContain(`"'=1+1"`);
});

/** Entries whose chain is checked; AUDIT_ENTRIES=100000 takes as many as the bound speaks of. */
const size = Number(process.env.AUDIT_ENTRIES ?? 5000);
test(`the chain of ${size} entries is checked, reading included, within 2 s for 100 000`, async () => {
	await owner.query(`alter table audit_event disable trigger chained`);
	await owner.query(`insert into audit_event (team_id, person_id, action, subject, after)
		select '${cast.author.teamId}', '${cast.author.personId}', 'comment added', 'note:' || gen_random_uuid(),
			jsonb_build_object('thread', gen_random_uuid(), 'body', 'A comment of usual length.')
		from generate_series(1, ${size})`);
	await owner.query(`do $$ declare e audit_event; h text; p bigint; begin
		select "position", hash into p, h from audit_link order by "position" desc limit 1;
		for e in select * from audit_event where id > (select max(event_id) from audit_link) order by id loop
			p := p + 1;
			h := encode(sha256(convert_to(h || audit_text(e), 'UTF8')), 'hex');
			insert into audit_link values (p, e.id, h);
		end loop;
	end $$`);
	await owner.query('alter table audit_event enable always trigger chained');
	const from = performance.now();
	const { count, faults } = await checkAudit(db(), []);
	const took = performance.now() - from;
	expect(faults).toEqual([]);
	expect(count).toBeGreaterThanOrEqual(size);
	process.stdout.write(`${count} audit entries checked in ${took.toFixed(0)} ms\n`);
	// The bound is for an idle machine; a busy one gets room.
	expect(took).toBeLessThan(Math.max(1000, (2000 * size) / 100_000) * 5);
}, 120_000);
