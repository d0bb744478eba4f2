import { afterAll, beforeAll, expect, test } from 'vitest';
import { newComment } from '$lib/schemas/comments';
import * as threads from '$lib/server/comments/threads';
import { closePool } from '$lib/server/evaluation/pool';
import { current } from '$lib/server/evaluation/store';
import { createDatabase, type TestDatabase } from '../support/database';
import { writeNote } from '../support/note-life';
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
