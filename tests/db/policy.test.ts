import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import type { Policy } from '$lib/schemas/review';
import * as threads from '$lib/server/comments/threads';
import { db } from '$lib/server/db/client';
import { auditEvent, revision } from '$lib/server/db/schema/review';
import { closePool } from '$lib/server/evaluation/pool';
import * as candidates from '$lib/server/revisions/candidates';
import * as policies from '$lib/server/revisions/policy';
import * as review from '$lib/server/revisions/review';
import * as revisions from '$lib/server/revisions/revisions';
import { createDatabase, type TestDatabase } from '../support/database';
import { check, edit, freeze, propose, proposal, seen, writeNote } from '../support/note-life';
import { givePassword, makeCast, makeMember, type Cast } from '../support/people';

let database: TestDatabase;
let cast: Cast;
let usual: Policy;
beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
	usual = await policies.get(cast.reader);
});
beforeEach(() => policies.set(cast.administrator, usual));
afterAll(async () => {
	await closePool();
	await database.drop();
});

const set = (change: Partial<Policy>) => policies.set(cast.administrator, { ...usual, ...change });
const refused = (message: string | RegExp) => ({
	message: typeof message === 'string' ? message : (expect.stringMatching(message) as string),
});

test('only administrators set it, everybody reads it, and the trail keeps before and after', async () => {
	await set({ checkers: 2 });
	expect(await policies.get(cast.reader)).toEqual({ ...usual, checkers: 2 });
	await expect(policies.set(cast.approver, usual)).rejects.toMatchObject({ code: 'forbidden' });
	const events = await db()
		.select({ before: auditEvent.before, after: auditEvent.after })
		.from(auditEvent)
		.where(eq(auditEvent.action, 'policy changed'))
		.orderBy(auditEvent.id);
	expect(events.at(-1)).toEqual({ before: usual, after: { ...usual, checkers: 2 } });
});

test('so many different people check as it asks, and the list says how many did', async () => {
	await set({ checkers: 2 });
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	await check(cast, number);
	const open = await seen(cast.engineer, number);
	await expect(candidates.check(cast.engineer, number, open)).rejects.toMatchObject(
		refused('You checked it already. Somebody else checks too.'),
	);
	const { state, conditions } = await review.status(cast.author, number);
	expect(state).toBe('in check');
	expect(conditions).toContainEqual({
		text: 'Checked by 2 people, none among its authors; 1 did.',
		fulfilled: false,
	});
	await expect(candidates.approve(cast.second, number, open)).rejects.toMatchObject(
		refused('It must be checked by 2 people first; 1 did.'),
	);
	await candidates.check(cast.approver, number, open);
	expect((await review.status(cast.author, number)).state).toBe('checked');
	expect(await candidates.approve(cast.second, number, open)).toBe('A');
});

test('the list on the candidate says for everybody what is fulfilled and what is missing', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	const texts = async () =>
		(await review.status(cast.author, number)).conditions.map(
			({ text, fulfilled }) => `${fulfilled ? '+' : '-'} ${text}`,
		);
	const settled = ['+ The one requirement is met.', '+ No line has an error.'];
	const approval = '- Approved by somebody who neither prepared nor wrote nor checked it.';
	expect(await texts()).toEqual([
		...settled,
		'+ No blocking comment is open.',
		'- Checked by one person, who is not among its authors.',
		approval,
	]);
	await check(cast, number);
	const { content } = (await candidates.get(cast.author, number)).candidate;
	const about = { cellId: content.cells[1]!.id, kind: 'question', body: 'Why?' } as const;
	await threads.open(cast.engineer, number, { ...about, blocking: true });
	expect(await texts()).toEqual([
		'- An open blocking question on cell 2.',
		...settled,
		'+ Checked by one person, who is not among its authors.',
		approval,
	]);
});

test('every open comment blocks where it says so, and so does an undecided requirement', async () => {
	await set({ commentsBlock: true, undecidedBlocks: true });
	const { number } = await writeNote(cast.author, 'In doubt', [
		{ kind: 'calculation', source: 'V_1 = tolerance(3 V, 1 %)' },
		{ kind: 'requirement', source: 'V_1 <= 3.001 V' },
	]);
	await propose(cast.author, number);
	const { content } = (await candidates.get(cast.author, number)).candidate;
	const about = { kind: 'remark', blocking: false, body: 'Hm.' } as const;
	await threads.open(cast.engineer, number, { ...about, cellId: content.cells[0]!.id });
	expect((await review.status(cast.author, number)).blockers.map(({ text }) => text)).toEqual([
		'An open remark on cell 1.',
		'Cell 2: V_1 <= 3.001 V is undecided.',
	]);
	await set({});
	expect((await review.status(cast.author, number)).blockers).toEqual([]);
});

test('a requirement is waived with a reason where it allows that, and the signature covers it', async () => {
	const { number } = await writeNote(cast.author, 'Waived', [
		{ kind: 'calculation', source: 'V_out = 5 V' },
		{ kind: 'requirement', source: 'V_out <= 6 V\nV_out <= 3 V  # limit of the input' },
	]);
	await propose(cast.author, number);
	await check(cast, number);
	const open = await seen(cast.approver, number);
	const cell = (await candidates.get(cast.author, number)).candidate.content.cells[1]!.id;
	const waivers = [[`${cell}:2`, 'The input is protected.']] as const;
	await expect(
		candidates.approve(cast.approver, number, { ...open, waivers }),
	).rejects.toMatchObject(refused(/cannot be waived/));
	await set({ waivers: true });
	expect((await review.status(cast.approver, number)).can.approve).toBe(true);
	await expect(candidates.approve(cast.approver, number, open)).rejects.toMatchObject({
		code: 'blocked',
	});
	const wrong = [[`${cell}:1`, 'It is met.']] as const;
	await expect(
		candidates.approve(cast.approver, number, { ...open, waivers: wrong }),
	).rejects.toMatchObject(refused(/cannot be waived/));
	expect(await candidates.approve(cast.approver, number, { ...open, waivers })).toBe('A');
	const { signOffs } = (await revisions.get(cast.reader, number, 'A')).revision;
	expect(signOffs.at(-1)).toMatchObject({
		meaning: 'approved',
		waivers: [{ cell, line: 2, requirement: 'V_out <= 3 V', reason: 'The input is protected.' }],
	});
	const [row] = await db().select().from(revision).orderBy(revision.frozenAt).limit(99).offset(1);
	expect(row?.canonical).toContain('"reason":"The input is protected."');
});

test('what can hurt people is acknowledged by the approver, and kept with the signature', async () => {
	const { number } = await writeNote(cast.author, 'High', [
		{ kind: 'calculation', source: 'V_bus = 80 V  # bus' },
	]);
	await propose(cast.author, number);
	await check(cast, number);
	const open = await seen(cast.approver, number);
	await expect(candidates.approve(cast.approver, number, open)).rejects.toMatchObject(
		refused(/^Acknowledge the caution first/),
	);
	await candidates.approve(cast.approver, number, { ...open, acknowledged: true });
	const { signOffs, details } = (await revisions.get(cast.reader, number, 'A')).revision;
	expect(details?.cautions.map(({ text }) => text)).toEqual([
		expect.stringMatching(/^V_bus \(80\sV\) is more than 60 V DC\.$/),
	]);
	expect(signOffs.at(-1)?.cautions).toEqual(details?.cautions.map(({ text }) => text));
});

test('signing in long ago asks for the address beside the password', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	await set({ identifyAfterMinutes: 60 });
	const hour = 3_600_000;
	const late = { ...cast.engineer, signedInAt: new Date(Date.now() - hour) };
	expect((await review.status(late, number)).identify).toBe(true);
	const open = await seen(cast.engineer, number);
	const question = refused(/^You signed in too long ago/);
	await expect(candidates.check(late, number, open)).rejects.toMatchObject(question);
	const others = { ...open, email: cast.author.email };
	await expect(candidates.check(late, number, others)).rejects.toMatchObject(question);
	await candidates.check(late, number, { ...open, email: late.email });
});

test('a candidate says what it is for, who is asked, by when, and what changed since the one before', async () => {
	const { number } = await writeNote(cast.author);
	const said = proposal({
		purpose: 'Release of the board',
		changes: '',
		checkers: [cast.engineer.personId],
		approver: cast.approver.personId,
		due: '2026-12-24',
	});
	const stranger = await givePassword(await makeMember(cast.author, 'reader'));
	await expect(
		candidates.propose(cast.author, number, { ...said, checkers: [stranger.personId] }),
	).rejects.toMatchObject(refused('One of the people asked may not check notes.'));
	await candidates.propose(cast.author, number, said);
	expect((await candidates.get(cast.engineer, number)).candidate.details).toMatchObject({
		letter: 'A',
		purpose: 'Release of the board',
		due: '2026-12-24',
		asked: {
			checkers: [{ name: 'Engineer Example' }],
			approver: { name: 'Approver Example' },
		},
	});
	const open = await seen(cast.engineer, number);
	await candidates.sendBack(cast.engineer, number, { ...open, reason: 'The load is missing.' });
	await expect(candidates.propose(cast.author, number, said)).rejects.toMatchObject(
		refused('Say what changed since candidate 1 was returned.'),
	);
	await candidates.propose(cast.author, number, { ...said, changes: 'The load is in it.' });
	expect((await candidates.get(cast.author, number)).candidate.details?.changes).toBe(
		'The load is in it.',
	);
});

test('a form sent again, an old tab and a closed candidate are answered with what became of it', async () => {
	const { number } = await writeNote(cast.author);
	await propose(cast.author, number);
	const open = await seen(cast.engineer, number);
	await candidates.check(cast.engineer, number, open);
	await expect(candidates.check(cast.engineer, number, open)).rejects.toMatchObject(
		refused('It is checked already.'),
	);
	await candidates.approve(cast.approver, number, open);
	const closed = refused(
		'Candidate 1 was approved by Approver Example and is frozen. Nothing more is signed on it.',
	);
	await expect(candidates.approve(cast.approver, number, open)).rejects.toMatchObject(closed);
	await expect(candidates.check(cast.engineer, number, open)).rejects.toMatchObject(closed);
	await expect(
		candidates.sendBack(cast.second, number, { ...open, reason: 'Too late.' }),
	).rejects.toMatchObject(closed);
});

test('a comment that is opened while it is approved either blocks it or comes after it', async () => {
	for (let round = 0; round < 6; round++) {
		const { number } = await writeNote(cast.author);
		await propose(cast.author, number);
		await check(cast, number);
		const open = await seen(cast.approver, number);
		const cellId = (await candidates.get(cast.author, number)).candidate.content.cells[1]!.id;
		const about = { cellId, kind: 'question', blocking: true, body: `Round ${round}` } as const;
		const [approved] = await Promise.allSettled([
			candidates.approve(cast.approver, number, open),
			threads.open(cast.engineer, number, about),
		]);
		const { state } = await review.status(cast.author, number);
		expect(state).toBe(approved.status === 'fulfilled' ? 'frozen' : 'checked');
		if (approved.status === 'rejected') expect(approved.reason).toMatchObject({ code: 'blocked' });
		else {
			const rows = await db().select({ canonical: revision.canonical }).from(revision);
			expect(rows.some(({ canonical }) => canonical.includes(`Round ${round}`))).toBe(false);
		}
	}
});

/** Races of edits against freezing; FREEZE_RACES=1000 runs as many. */
const races = Number(process.env.FREEZE_RACES ?? 6);
test(
	`in ${races} races of edits with freezing, what is frozen is the candidate, and no edit is lost`,
	async () => {
		const { id, number } = await writeNote(cast.author);
		let edits = 0;
		for (let round = 0; round < races; round++) {
			const write = () => edit(cast.author, id, 1, `\nx_${edits++} = 1 V`);
			await write();
			await Promise.allSettled([write(), freeze(cast, number), write()]);
			const { candidate } = await candidates.get(cast.author, number);
			if (candidate.state !== 'approved') continue;
			const { content, revision: frozen } = await revisions.get(
				cast.author,
				number,
				(await review.status(cast.author, number)).revisions[0]!.letter,
			);
			expect(content).toEqual(candidate.content);
			expect(frozen.details?.note.id).toBe(id);
		}
		await edit(cast.author, id, 1, '\nlast = 1 V');
		await freeze(cast, number);
		const { content } = (await candidates.get(cast.author, number)).candidate;
		for (let one = 0; one < edits; one++) expect(content.cells[1]!.source).toContain(`x_${one} =`);
	},
	60_000 + races * 3000,
);
