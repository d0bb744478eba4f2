import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { findActor } from '$lib/server/auth/sessions';
import { db } from '$lib/server/db/client';
import { auditEvent } from '$lib/server/db/schema/review';
import * as people from '$lib/server/teams/people';
import { createDatabase, type TestDatabase } from '../support/database';
import { makeCast, makeMember, makeTeam, signIn } from '../support/people';

let database: TestDatabase;
beforeAll(async () => {
	database = await createDatabase();
});
afterAll(() => database.drop());

test('a changed role counts from the next request on', async () => {
	const { administrator, reader } = await makeCast();
	const token = (await signIn(reader)).split('=')[1] ?? '';
	expect((await findActor(token))?.role).toBe('reader');
	await people.setRole(administrator, reader.personId, 'engineer');
	expect((await findActor(token))?.role).toBe('engineer');
	const [event] = await db()
		.select()
		.from(auditEvent)
		.where(eq(auditEvent.subject, `person:${reader.personId}`));
	expect(event).toMatchObject({
		action: 'role changed',
		personId: administrator.personId,
		before: { role: 'reader' },
		after: { role: 'engineer' },
	});
});

test('only administrators see and change roles, and only in their own team', async () => {
	const [ours, theirs] = [await makeCast(), await makeCast('Other Bench')];
	for (const who of [ours.reader, ours.engineer, ours.approver]) {
		await expect(people.list(who)).rejects.toMatchObject({ code: 'forbidden' });
		await expect(people.setRole(who, who.personId, 'administrator')).rejects.toMatchObject({
			code: 'forbidden',
		});
	}
	await expect(
		people.setRole(ours.administrator, theirs.reader.personId, 'approver'),
	).rejects.toMatchObject({ code: 'notFound' });
	expect((await people.list(ours.administrator)).map((one) => one.name)).toEqual([
		'Administrator Example',
		'Approver Example',
		'Author Example',
		'Engineer Example',
		'Reader Example',
		'Second Example',
	]);
});

test('the last administrator stays one, even when two give it up at once', async () => {
	const team = await makeTeam();
	const first = await makeMember(team, 'administrator', 'First Example');
	await expect(people.setRole(first, first.personId, 'reader')).rejects.toMatchObject({
		code: 'conflict',
	});
	const second = await makeMember(team, 'administrator', 'Second Example');
	const outcomes = await Promise.allSettled(
		[first, second].map((who) => people.setRole(who, who.personId, 'reader')),
	);
	expect(outcomes.map((one) => one.status).sort()).toEqual(['fulfilled', 'rejected']);
	const left = outcomes[0]?.status === 'rejected' ? first : second;
	expect((await people.list(left)).filter((one) => one.role === 'administrator')).toHaveLength(1);
});
