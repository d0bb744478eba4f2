import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { addCell, placedCells, titleOf, toContent } from '$lib/note/document';
import type { Actor } from '$lib/server/auth/access';
import { closePool } from '$lib/server/evaluation/pool';
import { fold } from '$lib/server/notes/folding';
import * as history from '$lib/server/notes/history';
import * as notes from '$lib/server/notes/notes';
import * as snapshots from '$lib/server/notes/snapshots';
import * as updates from '$lib/server/notes/updates';
import { db } from '$lib/server/db/client';
import * as Y from 'yjs';
import { createDatabase, type TestDatabase } from '../support/database';
import { LongLog } from '../support/long-log';
import { makeMember, makeTeam } from '../support/people';

let database: TestDatabase;
let ada: Actor;
let ben: Actor;
let reader: Actor;
beforeAll(async () => {
	database = await createDatabase();
	const team = await makeTeam();
	ada = await makeMember(team, 'engineer', 'Ada Example');
	ben = await makeMember(team, 'approver', 'Ben Example');
	reader = await makeMember(team, 'reader', 'Cem Example');
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

const minutes = (count: number) => new Date(Date.UTC(2020, 0, 6, 8) + count * 60_000);

/** A note that two people worked on in four sessions, with what it said after each edit. */
async function worked() {
	const cells = [{ kind: 'calculation' as const, source: 'a = 1 V\nb = 2 * a\n' }];
	const { id, number } = await notes.create(ada, { title: 'Divider', cells });
	const log = await LongLog.of(id);
	const said = new Map<number, unknown>();
	const edit = (by: Actor, at: number, make: (doc: Y.Doc) => void) => {
		log.change(by, minutes(at), make);
		said.set(log.rows.at(-1)!.seq, toContent(log.doc));
	};
	const insert = (text: string) => (doc: Y.Doc) => placedCells(doc)[0]!.text.insert(0, text);
	for (let key = 0; key < 80; key += 1) edit(ada, key / 10, insert('x'));
	for (let key = 0; key < 80; key += 1) edit(key % 2 ? ben : ada, 30 + key / 10, insert('y'));
	edit(ben, 60, (doc) => addCell(doc, 'text', null, 'Loaded.'));
	edit(ben, 61, (doc) => titleOf(doc).insert(0, 'Loaded '));
	for (let key = 0; key < 50; key += 1) edit(ada, 120 + key / 10, insert('z'));
	await log.write();
	return { id, number, said };
}

test('the timeline has one entry for each person and session of work, before and after folding', async () => {
	const { id, number } = await worked();
	const before = await history.sessions(ada, number);
	expect(
		before.map(({ person, edits, cells, from, to }) => [
			person.name,
			edits,
			cells.length,
			(Date.parse(to) - Date.parse(from)) / 60_000,
		]),
	).toEqual([
		['Ada Example', 50, 1, 4.9],
		['Ben Example', 2, 1, 1],
		['Ben Example', 40, 1, 7.8],
		['Ada Example', 40, 1, 7.8],
		['Ada Example', 80, 1, 7.9],
		['Ada Example', 1, 1, 0],
	]);
	const { doc, seq } = await updates.loadDocument(id);
	await snapshots.write(id, seq, Y.encodeStateAsUpdate(doc));
	await fold(id);
	const without = (sessions: typeof before) =>
		sessions.map(({ firstSeq, seq, ...rest }) => ({ ...rest, any: firstSeq <= seq }));
	expect(without(await history.sessions(ada, number))).toEqual(without(before));
});

test('every moment can be seen again with its results and authors, whatever was folded since', async () => {
	const { id, number, said } = await worked();
	for (const seq of [2, 81, 120, 161, 162, 163, 213]) {
		const moment = await history.at(ada, number, seq);
		expect(moment.seq).toBe(seq);
		expect(moment.content).toEqual(said.get(seq));
	}
	const first = await history.at(ben, number, 1);
	expect(first.results.quantities.b?.value).toBe(2);
	expect(first.by).toEqual({ id: ada.personId, name: 'Ada Example' });
	const [cell] = first.content.cells;
	expect((await history.at(ada, number, 161)).authors[cell!.id]?.name).toBe('Ben Example');
	const newest = await history.at(ada, number, 213);
	expect(newest.authors[newest.content.cells[0]!.id]?.name).toBe('Ada Example');

	const { doc, seq } = await updates.loadDocument(id);
	await snapshots.write(id, seq, Y.encodeStateAsUpdate(doc));
	await fold(id);
	const { rows } = await db().execute<{ count: number }>(
		sql`select count(*)::int as count from note_update where note_id = ${id}`,
	);
	expect(rows[0]!.count).toBeLessThan(10);
	for (const session of await history.sessions(ada, number)) {
		const moment = await history.at(ada, number, session.seq);
		expect(moment.content).toEqual(said.get(moment.seq) ?? first.content);
	}
	// A moment inside a stretch is shown as the stretch's end.
	const inside = await history.at(ada, number, 40);
	expect(inside.seq).toBeGreaterThan(40);
	expect(inside.content).toEqual(said.get(inside.seq));
});

test('whoever may not read the working copy learns nothing of its history', async () => {
	const { number } = await worked();
	await expect(history.sessions(reader, number)).rejects.toMatchObject({ code: 'forbidden' });
	await expect(history.at(reader, number, 1)).rejects.toMatchObject({ code: 'forbidden' });
	const stranger = await makeMember(await makeTeam('Other'), 'approver');
	await expect(history.sessions(stranger, number)).rejects.toMatchObject({ code: 'notFound' });
	await expect(history.at(stranger, number, 1)).rejects.toMatchObject({ code: 'notFound' });
	await expect(history.at(ada, number, 5000)).rejects.toMatchObject({ code: 'notFound' });
});
