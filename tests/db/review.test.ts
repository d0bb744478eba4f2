import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { AppError } from '$lib/errors';
import * as threads from '$lib/server/comments/threads';
import { db } from '$lib/server/db/client';
import { note } from '$lib/server/db/schema/notes';
import { auditEvent, revision, signOff } from '$lib/server/db/schema/review';
import { closePool } from '$lib/server/evaluation/pool';
import * as candidates from '$lib/server/revisions/candidates';
import * as review from '$lib/server/revisions/review';
import { createDatabase, type TestDatabase } from '../support/database';
import { check, edit, freeze, propose, proposal, seen, writeNote } from '../support/note-life';
import { makeCast, testPassword, type Cast } from '../support/people';

let database: TestDatabase;
let cast: Cast;
beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

/** The expected failure of a deed, as "code: sentence". */
async function failure(deed: Promise<unknown>): Promise<string> {
	const error: unknown = await deed.then(
		() => undefined,
		(thrown: unknown) => thrown,
	);
	if (!(error instanceof AppError)) throw new Error('no expected failure', { cause: error });
	return `${error.code}: ${error.message}`;
}

const state = async (number: string) => (await review.status(cast.author, number)).state;
const meanings = async (number: string) =>
	(await candidates.get(cast.author, number)).candidate.signOffs.map((one) => one.meaning);

test('a note goes from draft through check to frozen, and a change makes it a draft again', async () => {
	const { id, number } = await writeNote(cast.author);
	expect(await state(number)).toBe('draft');
	await propose(cast.author, number);
	expect(await state(number)).toBe('in check');
	await check(cast, number);
	expect(await state(number)).toBe('checked');
	await candidates.approve(cast.approver, number, await seen(cast.approver, number));
	expect(await state(number)).toBe('frozen');
	await edit(cast.author, id, 1, ' ');
	expect(await state(number)).toBe('draft');
});

test('a returned note stays returned until it is proposed again', async () => {
	const { id, number } = await writeNote(cast.author);
	await propose(cast.author, number);
	const reason = 'The load is missing.';
	await candidates.sendBack(cast.engineer, number, {
		...(await seen(cast.engineer, number)),
		reason,
	});
	expect(await state(number)).toBe('returned');
	await edit(cast.author, id, 1, ' ');
	expect(await state(number)).toBe('returned');
	await propose(cast.author, number);
	expect(await state(number)).toBe('in check');
	expect((await candidates.get(cast.author, number)).candidate.ordinal).toBe(2);
});

test('a candidate keeps budget, bounds and trials of what its requirements speak of, the same each time', async () => {
	const cells = [
		{
			kind: 'calculation' as const,
			source: 'R1 = tolerance(1 kohm, 1 %)\nI1 = 5 V / R1\nP1 = R1 * I1^2',
		},
		{ kind: 'requirement' as const, source: 'I1 <= 5.2 mA' },
	];
	const { number } = await writeNote(cast.author, 'In doubt', cells);
	const results = async () => (await candidates.get(cast.author, number)).candidate.results;
	await propose(cast.author, number);
	const first = await results();
	expect(first.quantities.I1?.budget).toMatchObject([{ input: 'R1', share: 1 }]);
	expect(first.quantities.I1?.worstCase?.exact).toBe(true);
	expect(first.quantities.I1?.monteCarlo).toMatchObject({ trials: 1_000_000, validated: false });
	expect(first.quantities.P1?.monteCarlo).toBeUndefined();
	const reason = 'Once more.';
	const signed = { ...(await seen(cast.engineer, number)), reason };
	await candidates.sendBack(cast.engineer, number, signed);
	await propose(cast.author, number);
	expect(await results()).toEqual(first);
});

test('authors may not check, nor may who prepared it', async () => {
	const { id, number } = await writeNote(cast.author);
	await edit(cast.engineer, id, 1, ' ');
	await propose(cast.approver, number);
	expect(
		await failure(candidates.check(cast.author, number, await seen(cast.author, number))),
	).toBe('conflict: You are among its authors. Somebody else checks it.');
	expect(await failure(check(cast, number))).toMatch(/^conflict: You are among its authors/);
	const own = await seen(cast.approver, number);
	expect(await failure(candidates.check(cast.approver, number, own))).toMatch(
		/^conflict: You prepared/,
	);
	expect(await meanings(number)).toEqual(['prepared']);
});

test('who prepared, wrote or checked it may not approve it, and the check comes first', async () => {
	const first = await writeNote(cast.author);
	await propose(cast.approver, first.number);
	const asPreparer = await seen(cast.approver, first.number);
	expect(await failure(candidates.approve(cast.approver, first.number, asPreparer))).toMatch(
		/^conflict: You prepared it/,
	);
	expect(await failure(candidates.approve(cast.second, first.number, asPreparer))).toBe(
		'conflict: It must be checked first.',
	);
	const second = await writeNote(cast.author);
	await edit(cast.second, second.id, 1, ' ');
	await propose(cast.author, second.number);
	await candidates.check(cast.approver, second.number, await seen(cast.approver, second.number));
	const open = await seen(cast.approver, second.number);
	expect(await failure(candidates.approve(cast.approver, second.number, open))).toMatch(
		/^conflict: You checked it/,
	);
	expect(await failure(candidates.approve(cast.second, second.number, open))).toMatch(
		/^conflict: You are among its authors/,
	);
	expect(await failure(candidates.approve(cast.engineer, second.number, open))).toMatch(
		/^forbidden: /,
	);
	expect(await meanings(second.number)).toEqual(['prepared', 'checked']);
});

test('a wrong password signs nothing, at each sign-off', async () => {
	const { number } = await writeNote(cast.author);
	const wrong = 'not the password';
	expect(
		await failure(candidates.propose(cast.author, number, proposal({ password: wrong }))),
	).toMatch(/^forbidden: The password/);
	expect((await review.status(cast.author, number)).candidate).toBeNull();
	await propose(cast.author, number);
	const { digest } = await seen(cast.engineer, number);
	const signing = { password: wrong, digest };
	expect(await failure(candidates.check(cast.engineer, number, signing))).toMatch(
		/^forbidden: The password/,
	);
	expect(
		await failure(candidates.sendBack(cast.engineer, number, { ...signing, reason: 'No.' })),
	).toMatch(/^forbidden: The password/);
	await check(cast, number);
	expect(await failure(candidates.approve(cast.approver, number, signing))).toMatch(
		/^forbidden: The password/,
	);
	expect(await meanings(number)).toEqual(['prepared', 'checked']);
	expect(await state(number)).toBe('checked');
});

test('a signature is for the candidate that was looked at', async () => {
	const { id, number } = await writeNote(cast.author);
	await propose(cast.author, number);
	const old = await seen(cast.engineer, number);
	await candidates.sendBack(cast.author, number, { ...old, reason: 'Forgot the load.' });
	await edit(cast.author, id, 1, '\nR_load = 1 Mohm');
	await propose(cast.author, number);
	expect(await failure(candidates.check(cast.engineer, number, old))).toBe(
		'conflict: The candidate is another one by now. Look at it first.',
	);
	expect(await meanings(number)).toEqual(['prepared']);
});

test('two approvals at once freeze once', async () => {
	const { id, number } = await writeNote(cast.author);
	await propose(cast.author, number);
	await check(cast, number);
	const open = await seen(cast.approver, number);
	const outcomes = await Promise.allSettled(
		[cast.approver, cast.second, cast.approver, cast.second].map((who) =>
			candidates.approve(who, number, open),
		),
	);
	expect(outcomes.filter((one) => one.status === 'fulfilled')).toHaveLength(1);
	for (const one of outcomes) {
		if (one.status === 'rejected') expect(one.reason).toMatchObject({ code: 'conflict' });
	}
	expect(await db().select().from(revision).where(eq(revision.noteId, id))).toHaveLength(1);
});

test('two proposals at once make one candidate', async () => {
	const { number } = await writeNote(cast.author);
	const outcomes = await Promise.allSettled([
		propose(cast.author, number),
		propose(cast.author, number),
	]);
	expect(outcomes.map((one) => one.status).sort()).toEqual(['fulfilled', 'rejected']);
	expect((await candidates.get(cast.author, number)).candidate.ordinal).toBe(1);
});

test('an open blocking thread and a requirement that is not met block freezing, and are listed', async () => {
	const { id, number } = await writeNote(cast.author, 'Blocked', [
		{ kind: 'calculation', source: 'V_out = 5 V' },
		{ kind: 'requirement', source: 'V_out <= 6 V\nV_out <= 3 V  # limit of the input' },
	]);
	await propose(cast.author, number);
	const { content } = (await candidates.get(cast.author, number)).candidate;
	const about = { kind: 'question', blocking: true, body: 'Why 5 V?' } as const;
	const thread = await threads.open(cast.engineer, number, {
		...about,
		cellId: content.cells[0]!.id,
	});
	await threads.open(cast.engineer, number, {
		...about,
		blocking: false,
		cellId: content.cells[0]!.id,
	});
	await check(cast, number);

	const { blockers, can } = await review.status(cast.approver, number);
	expect(blockers).toEqual([
		{ text: 'An open blocking question on cell 1.', cellId: content.cells[0]!.id },
		{ text: 'Cell 2: V_out <= 3 V is not met.', cellId: content.cells[1]!.id },
	]);
	expect(can.approve).toBe('What blocks it must be settled first.');
	const open = await seen(cast.approver, number);
	await expect(candidates.approve(cast.approver, number, open)).rejects.toMatchObject({
		code: 'blocked',
		details: { blockers },
	});
	await threads.setClosed(cast.engineer, number, thread.id, true);
	await expect(candidates.approve(cast.approver, number, open)).rejects.toMatchObject({
		code: 'blocked',
		details: { blockers: [blockers[1]] },
	});
	expect(await db().select().from(revision).where(eq(revision.noteId, id))).toEqual([]);
});

test('a thread that is closed no longer blocks, and one opened again does', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	await check(cast, number);
	const { content } = (await candidates.get(cast.author, number)).candidate;
	const thread = await threads.open(cast.engineer, number, {
		cellId: content.cells[1]!.id,
		kind: 'correction',
		blocking: true,
		body: 'Take the loaded value.',
	});
	await threads.setClosed(cast.author, number, thread.id, true);
	await threads.setClosed(cast.engineer, number, thread.id, false);
	const open = await seen(cast.approver, number);
	expect(await failure(candidates.approve(cast.approver, number, open))).toMatch(/^blocked: /);
	await threads.setClosed(cast.author, number, thread.id, true);
	expect(await candidates.approve(cast.approver, number, open)).toBe('A');
});

test('a line with an error cannot be proposed', async () => {
	const { number } = await writeNote(cast.author, 'Wrong', [
		{ kind: 'calculation', source: 'V_out = 5 V\nI = V_out / R_lost' },
	]);
	await expect(propose(cast.author, number)).rejects.toMatchObject({
		code: 'blocked',
		details: { blockers: [{ text: expect.stringMatching(/^Cell 1, line 2: .*R_lost/) as string }] },
	});
	expect((await review.status(cast.author, number)).candidate).toBeNull();
});

test('nothing is proposed twice: neither while one is open nor unchanged after it was frozen', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	expect(await failure(propose(cast.author, number))).toBe(
		'conflict: Candidate A is in check. Only one is open at a time.',
	);
	await check(cast, number);
	await candidates.approve(cast.approver, number, await seen(cast.approver, number));
	expect(await failure(propose(cast.author, number))).toBe(
		'conflict: Nothing changed since revision A.',
	);
});

test('what the page offers is what the deed allows', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	const can = async (who: Cast[keyof Cast]) => (await review.status(who, number)).can;
	expect((await can(cast.author)).check).toMatch(/^You prepared/);
	expect(await can(cast.engineer)).toMatchObject({ check: true, return: true });
	expect((await can(cast.engineer)).approve).toBe('Your role (engineer) does not approve notes.');
	expect((await can(cast.administrator)).return).toMatch(/^Your role/);
	expect((await can(cast.approver)).approve).toBe('It must be checked first.');
	await check(cast, number);
	expect((await can(cast.approver)).approve).toBe(true);
});

test('each deed leaves one entry in the audit trail, a refused one none', async () => {
	const { id, number } = await writeNote(cast.author);
	await freeze(cast, number);
	await failure(propose(cast.author, number));
	const events = await db()
		.select()
		.from(auditEvent)
		.where(eq(auditEvent.subject, `note:${id}`))
		.orderBy(auditEvent.id);
	expect(events.map(({ action, personId }) => [action, personId])).toEqual([
		['note created', cast.author.personId],
		['candidate proposed', cast.author.personId],
		['candidate checked', cast.engineer.personId],
		['revision frozen', cast.approver.personId],
	]);
});

test('a sign-off keeps the name and role of its time', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	const rows = await db().select().from(signOff).where(eq(signOff.personId, cast.author.personId));
	expect(rows.at(-1)).toMatchObject({
		meaning: 'prepared',
		personName: 'Author Example',
		role: 'engineer',
		method: 'password',
	});
	expect(JSON.stringify(rows)).not.toContain(testPassword);
});

test('numbers count up within a team and start anew in another', async () => {
	const other = await makeCast('Second Bench');
	const [a, b] = await Promise.all([writeNote(other.author), writeNote(other.engineer)]);
	expect([a.number, b.number].sort()).toEqual(['MN-001', 'MN-002']);
	expect(await db().select().from(note).where(eq(note.teamId, other.author.teamId))).toHaveLength(
		2,
	);
});
