import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { dispositionOf, newComment, type Thread } from '$lib/schemas/comments';
import * as mentions from '$lib/server/comments/mentions';
import * as threads from '$lib/server/comments/threads';
import { db } from '$lib/server/db/client';
import { comment } from '$lib/server/db/schema/notes';
import { closePool } from '$lib/server/evaluation/pool';
import { current } from '$lib/server/evaluation/store';
import { keptComments } from '$lib/server/revisions/kept-comments';
import * as review from '$lib/server/revisions/review';
import { download } from '$lib/server/revisions/sealed-file';
import { createDatabase, type TestDatabase } from '../support/database';
import { freeze, propose, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';

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

const question = { cellId: 'abcdefghjkmn', kind: 'question', blocking: true } as const;

test('a thread is opened, answered, closed and opened again, and says by whom', async () => {
	const { number } = await writeNote(cast.author);
	const opened = await threads.open(cast.engineer, number, { ...question, body: 'Why 4?' });
	expect(opened).toMatchObject({
		...question,
		closed: null,
		comments: [{ person: { name: 'Engineer Example' }, body: 'Why 4?' }],
	});
	const answered = await threads.reply(cast.author, number, opened.id, {
		body: 'It halves twice.',
	});
	expect(answered.comments.map((one) => one.body)).toEqual(['Why 4?', 'It halves twice.']);
	const closed = await threads.setClosed(cast.administrator, number, opened.id, true);
	expect(closed.closed?.by).toBe('Administrator Example');
	const again = await threads.setClosed(cast.author, number, opened.id, true);
	expect(again.closed).toEqual(closed.closed);
	expect((await threads.setClosed(cast.author, number, opened.id, false)).closed).toBeNull();
	expect(await threads.list(cast.approver, number)).toHaveLength(1);
});

test('threads keep the order they were opened in, whoever answers last', async () => {
	const { number } = await writeNote(cast.author);
	const first = await threads.open(cast.engineer, number, { ...question, body: 'First' });
	await threads.open(cast.engineer, number, { ...question, body: 'Second' });
	await threads.reply(cast.author, number, first.id, { body: 'Answer' });
	const listed = await threads.list(cast.author, number);
	expect(listed.map((one) => one.comments[0]?.body)).toEqual(['First', 'Second']);
});

test('readers neither read nor write comments', async () => {
	const { number } = await writeNote(cast.author);
	const { id } = await threads.open(cast.engineer, number, { ...question, body: 'Why 4?' });
	for (const deed of [
		threads.list(cast.reader, number),
		threads.open(cast.reader, number, { ...question, body: 'Hm.' }),
		threads.reply(cast.reader, number, id, { body: 'Hm.' }),
		threads.setClosed(cast.reader, number, id, true),
	]) {
		await expect(deed).rejects.toMatchObject({ code: 'forbidden' });
	}
});

test('a null character, which the database cannot keep, breaks neither a comment nor a note', async () => {
	const body = newComment.parse({ body: 'Why\0 4?' });
	expect(body).toEqual({ body: 'Why 4?' });
	expect(newComment.safeParse({ body: '\0' }).success).toBe(false);
	const cells = [{ kind: 'text' as const, source: 'a\0b' }];
	const { id } = await writeNote(cast.author, 'Pasted', cells);
	expect((await current(id)).content.cells[0]?.source).toBe('a\ufffdb');
});

test('an answered thread waits for whoever opened it, whose reply opens it again', async () => {
	const { number } = await writeNote(cast.author);
	const { id } = await threads.open(cast.engineer, number, { ...question, body: 'Why 4?' });
	const answer = { body: 'It halves twice.', answers: true };
	const answered = await threads.reply(cast.author, number, id, answer);
	expect([dispositionOf(answered), answered.answered?.by]).toEqual(['answered', 'Author Example']);
	await expect(threads.reply(cast.engineer, number, id, answer)).rejects.toMatchObject({
		code: 'conflict',
	});
	const asked = await threads.reply(cast.engineer, number, id, { body: 'Halves what?' });
	expect(dispositionOf(asked)).toBe('open');
	await threads.reply(cast.author, number, id, answer);
	const closed = await threads.setClosed(cast.engineer, number, id, true);
	expect(dispositionOf(closed)).toBe('closed');
	await expect(threads.reply(cast.author, number, id, answer)).rejects.toMatchObject({
		code: 'conflict',
	});
	const reopened = await threads.setClosed(cast.author, number, id, false);
	expect(dispositionOf(reopened)).toBe('open');
	expect(reopened.changes?.map(({ what, by }) => `${what} by ${by}`)).toEqual([
		'answered by Author Example',
		'reopened by Engineer Example',
		'answered by Author Example',
		'closed by Engineer Example',
		'reopened by Author Example',
	]);
});

test('an answered comment that blocks freezing goes on blocking until it is closed or blocks no more', async () => {
	const { number } = await writeNote(cast.author);
	const { id } = await threads.open(cast.engineer, number, { ...question, body: 'Why 4?' });
	await propose(cast.author, number);
	const blockers = async () => (await review.status(cast.author, number)).blockers.length;
	await threads.reply(cast.author, number, id, { body: 'It halves twice.', answers: true });
	expect(await blockers()).toBe(1);
	const changed = await threads.setBlocking(cast.engineer, number, id, false);
	expect([changed.blocking, changed.changes?.at(-1)?.what]).toEqual([false, 'not blocking']);
	expect(await blockers()).toBe(0);
	await expect(threads.setBlocking(cast.reader, number, id, true)).rejects.toMatchObject({
		code: 'forbidden',
	});
});

test('people are named by their id, read by their name, and find what names them', async () => {
	const { number } = await writeNote(cast.author, 'Named in a comment');
	const body = '@Approver Example, is this yours? Not @Approver Examples, not @Reader Example.';
	const { id } = await threads.open(cast.engineer, number, { ...question, body });
	const [said] = await db().select().from(comment).where(eq(comment.threadId, id));
	expect(said?.body).toBe(
		`@{${cast.approver.personId}}, is this yours? Not @Approver Examples, not @Reader Example.`,
	);
	const [read] = await threads.list(cast.author, number);
	expect(read?.comments[0]).toMatchObject({
		body,
		mentions: [{ id: cast.approver.personId, name: 'Approver Example' }],
	});
	expect(await mentions.mentionsOf(cast.approver)).toMatchObject([
		{ number, threadId: id, disposition: 'open', by: 'Engineer Example', body },
	]);
	expect(await mentions.mentionsOf(cast.second)).toEqual([]);
	await expect(mentions.mentionsOf(cast.reader)).rejects.toMatchObject({ code: 'forbidden' });
	const named = (await mentions.people(cast.author, number)).map(({ name }) => name);
	expect(named).toContain('Administrator Example');
	expect(named).not.toContain('Reader Example');
});

test('an id that somebody types names nobody who is not in the team', async () => {
	const other = await makeCast('Other Bench');
	const { number } = await writeNote(cast.author);
	const body = `@{${other.author.personId}} @Author Example`;
	const opened = await threads.open(cast.engineer, number, { ...question, body });
	expect(opened.comments[0]?.body).toBe(body);
	expect(await mentions.mentionsOf(other.author)).toEqual([]);
});

test('what a comment is about is kept with it and goes into the review record of the revision', async () => {
	const { number } = await writeNote(cast.author);
	const anchor = { kind: 'words', start: 'AQID', end: 'AQIE', quote: 'The divider' } as const;
	const about = { ...question, blocking: false, anchor };
	await threads.open(cast.engineer, number, { ...about, body: '@Author Example: which?' });
	expect((await threads.list(cast.author, number))[0]?.anchor).toEqual(anchor);
	await freeze(cast, number);
	const file = JSON.parse(await download(cast.reader, number, 'A')) as {
		revision: { review: Thread[] };
	};
	expect(file.revision.review).toMatchObject([
		{ anchor: { quote: 'The divider' }, comments: [{ body: '@Author Example: which?' }] },
	]);
	const [kept] = await keptComments(cast.reader, number, 'A');
	expect(kept?.anchor?.quote).toBe('The divider');
});
