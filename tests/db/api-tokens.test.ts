import { createHash } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as apiTokens from '$lib/server/auth/api-tokens';
import { db } from '$lib/server/db/client';
import { membership } from '$lib/server/db/schema/people';
import { auditEvent } from '$lib/server/db/schema/review';
import { apiToken } from '$lib/server/db/schema/tokens';
import { createDatabase, type TestDatabase } from '../support/database';
import { makeMember, makeTeam } from '../support/people';

let database: TestDatabase;
beforeAll(async () => {
	database = await createDatabase();
});
afterAll(() => database.drop());

const newcomer = async () => makeMember(await makeTeam(), 'engineer');
const rowOf = async (id: string) => {
	const [row] = await db().select().from(apiToken).where(eq(apiToken.id, id));
	if (!row) throw new Error('there is no such row');
	return row;
};
const set = (id: string, change: Record<string, ReturnType<typeof sql>>) =>
	db().update(apiToken).set(change).where(eq(apiToken.id, id));

test('the table keeps the SHA-256 of a token and the list no more than its name and times', async () => {
	const actor = await newcomer();
	const { id, token } = await apiTokens.create(actor, { name: 'Bench 4', days: 30 });
	expect(token).toMatch(/^hd_[\w-]{43}$/);
	const row = await rowOf(id);
	expect(row.hash).toBe(createHash('sha256').update(token).digest('hex'));
	const listed = await apiTokens.list(actor);
	expect(listed).toEqual([
		{
			id,
			name: 'Bench 4',
			createdAt: row.createdAt.toISOString(),
			lastUsedAt: null,
			expiresAt: row.expiresAt?.toISOString(),
			expired: false,
		},
	]);
	expect(JSON.stringify([row, listed])).not.toContain(token);
});

test('a token acts as its person with the role they have then', async () => {
	const actor = await newcomer();
	const { token } = await apiTokens.create(actor, { name: 'Bench', days: null });
	expect(await apiTokens.findActor(token)).toEqual(actor);
	await db()
		.update(membership)
		.set({ role: 'reader' })
		.where(eq(membership.personId, actor.personId));
	expect((await apiTokens.findActor(token))?.role).toBe('reader');
	await db().delete(membership).where(eq(membership.personId, actor.personId));
	expect(await apiTokens.findActor(token)).toBeUndefined();
});

test('a token counts in the team it was made in and in no other', async () => {
	const actor = await newcomer();
	const { teamId } = await makeTeam('Other Bench');
	await db().insert(membership).values({ teamId, personId: actor.personId, role: 'administrator' });
	const { token } = await apiTokens.create(actor, { name: 'Bench', days: 1 });
	expect(await apiTokens.findActor(token)).toMatchObject({
		teamId: actor.teamId,
		role: 'engineer',
	});
	expect(await apiTokens.list({ ...actor, teamId, role: 'administrator' })).toEqual([]);
});

test('a revoked token is refused from then on and no longer listed', async () => {
	const actor = await newcomer();
	const kept = await apiTokens.create(actor, { name: 'Kept', days: 1 });
	const ended = await apiTokens.create(actor, { name: 'Ended', days: 1 });
	expect(await apiTokens.revoke(actor, ended.id)).toBe('Ended');
	expect(await apiTokens.findActor(ended.token)).toBeUndefined();
	expect(await apiTokens.findActor(kept.token)).toEqual(actor);
	expect((await apiTokens.list(actor)).map((one) => one.name)).toEqual(['Kept']);
	await expect(apiTokens.revoke(actor, ended.id)).rejects.toMatchObject({ code: 'notFound' });
});

test('a token is refused once its days are over, and listed as expired', async () => {
	const actor = await newcomer();
	const { id, token } = await apiTokens.create(actor, { name: 'Bench', days: 90 });
	const { createdAt, expiresAt } = await rowOf(id);
	expect((expiresAt!.getTime() - createdAt.getTime()) / 86_400_000).toBe(90);
	await set(id, { expiresAt: sql`now() + interval '1 minute'` });
	expect(await apiTokens.findActor(token)).toEqual(actor);
	await set(id, { expiresAt: sql`now() - interval '1 second'` });
	expect(await apiTokens.findActor(token)).toBeUndefined();
	expect((await apiTokens.list(actor)).map((one) => one.expired)).toEqual([true]);
});

test('nobody lists or revokes the tokens of somebody else', async () => {
	const team = await makeTeam();
	const owner = await makeMember(team, 'engineer');
	const { id, token } = await apiTokens.create(owner, { name: 'Bench', days: null });
	for (const role of ['engineer', 'administrator'] as const) {
		const other = await makeMember(team, role);
		expect(await apiTokens.list(other)).toEqual([]);
		await expect(apiTokens.revoke(other, id)).rejects.toMatchObject({ code: 'notFound' });
	}
	expect(await apiTokens.findActor(token)).toEqual(owner);
});

test('use is written down, and not more than once a minute', async () => {
	const actor = await newcomer();
	const { id, token } = await apiTokens.create(actor, { name: 'Bench', days: 1 });
	const uses = async () => {
		await apiTokens.findActor(token);
		const { rows } = await db().execute<{ last: string; version: string }>(
			sql`select last_used_at as last, xmin as version from api_token where id = ${id}`,
		);
		return rows[0]!;
	};
	const first = await uses();
	expect(first.last).not.toBeNull();
	expect(await uses()).toEqual(first);
	await set(id, { lastUsedAt: sql`now() - interval '59 seconds'` });
	const early = await uses();
	expect(await uses()).toEqual(early);
	await set(id, { lastUsedAt: sql`now() - interval '61 seconds'` });
	const later = await uses();
	expect(Date.parse(later.last)).toBeGreaterThan(Date.parse(early.last));
	await apiTokens.revoke(actor, id);
	expect((await uses()).last).toEqual(later.last);
});

test('making and revoking are written down, without the token', async () => {
	const actor = await newcomer();
	const { id, token } = await apiTokens.create(actor, { name: 'Bench', days: null });
	await apiTokens.revoke(actor, id);
	const events = await db()
		.select()
		.from(auditEvent)
		.where(eq(auditEvent.subject, `token:${id}`))
		.orderBy(auditEvent.id);
	const { personId, teamId } = actor;
	expect(events).toMatchObject([
		{ action: 'token created', personId, teamId, after: { name: 'Bench', expiresAt: null } },
		{ action: 'token revoked', personId, teamId, before: { name: 'Bench' } },
	]);
	expect(JSON.stringify(events)).not.toContain(token);
});

test('what is no token opens nothing, nor does the stored hash', async () => {
	const actor = await newcomer();
	const { id, token } = await apiTokens.create(actor, { name: 'Bench', days: null });
	const { hash } = await rowOf(id);
	for (const wrong of ['', 'hd_', hash, `hd_${hash}`, token.slice(0, -1), `${token}A`, `${token} `])
		expect(await apiTokens.findActor(wrong), wrong).toBeUndefined();
});

test('a person has at most 50 tokens', async () => {
	const actor = await newcomer();
	const made = [];
	for (let i = 0; i < 50; i++)
		made.push(await apiTokens.create(actor, { name: `${i}`, days: null }));
	const one = { name: 'One more', days: null };
	await expect(apiTokens.create(actor, one)).rejects.toMatchObject({ code: 'conflict' });
	await apiTokens.revoke(actor, made[7]!.id);
	await apiTokens.create(actor, one);
});
