import { and, eq, sql } from 'drizzle-orm';
import fc from 'fast-check';
import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { addCell, placedCells, removeCell, toContent } from '$lib/note/document';
import { takeUpdates } from '$lib/note/take-updates';
import type { Actor } from '$lib/server/auth/access';
import { db } from '$lib/server/db/client';
import { noteUpdate } from '$lib/server/db/schema/notes';
import * as authorship from '$lib/server/notes/authorship';
import { fold } from '$lib/server/notes/folding';
import * as notes from '$lib/server/notes/notes';
import * as snapshots from '$lib/server/notes/snapshots';
import { append, type Edit } from '$lib/server/notes/append';
import * as updates from '$lib/server/notes/updates';
import { createDatabase, type TestDatabase } from '../support/database';
import { LongLog, stored } from '../support/long-log';
import { makeMember, makeTeam } from '../support/people';

let database: TestDatabase;
let people: Actor[];
beforeAll(async () => {
	database = await createDatabase();
	const team = await makeTeam();
	people = [
		await makeMember(team, 'engineer', 'Ada Example'),
		await makeMember(team, 'engineer', 'Ben Example'),
		await makeMember(team, 'approver', 'Cem Example'),
	];
});
afterAll(() => database.drop());

/** A statement of who owns the tables. */
async function owner(statement: string): Promise<void> {
	const client = new pg.Client({ connectionString: database.ownerUrl });
	await client.connect();
	await client.query(statement).finally(() => client.end());
}

const makeNote = async () =>
	(await notes.create(people[0]!, { title: 'Divider', cells: [cell('a = 1'), cell('b = 2')] })).id;
const cell = (source: string) => ({ kind: 'calculation' as const, source });
const minutes = (count: number) => new Date(Date.UTC(2020, 0, 6, 8) + count * 60_000);

/** What the database makes of a note: content, state vector and who wrote. */
async function standing(noteId: string) {
	const { doc, seq, pending } = await updates.loadDocument(noteId);
	return {
		content: toContent(doc),
		vector: Object.fromEntries(Y.decodeStateVector(Y.encodeStateVector(doc))),
		seq,
		pending,
		authors: await updates.authorsSince(noteId, 0),
	};
}

/** The document that the rows alone make, without snapshots. */
async function ofLog(noteId: string) {
	const rows = await updates.rowsSince(noteId, 0);
	const doc = new Y.Doc();
	takeUpdates(
		doc,
		rows.map(({ bytes }) => bytes),
		'log',
	);
	return {
		content: toContent(doc),
		vector: Object.fromEntries(Y.decodeStateVector(Y.encodeStateVector(doc))),
	};
}

async function snapshot(noteId: string): Promise<void> {
	const { doc, seq } = await updates.loadDocument(noteId);
	await snapshots.write(noteId, seq, Y.encodeStateAsUpdate(doc));
}

test('an edit under the client id of somebody else is refused with all that came with it, and named', async () => {
	const noteId = await makeNote();
	const edit = (id: string, person: number, client: number): Edit => ({
		id,
		personId: people[person]!.personId,
		bytes: Y.encodeStateAsUpdate(new Y.Doc()),
		clients: [client],
		cells: [],
	});
	await append(noteId, [edit('one', 0, 4711)]);
	const refused = append(noteId, [edit('two', 1, 4712), edit('three', 1, 4711)]);
	await expect(refused).rejects.toMatchObject({ code: 'conflict', details: { ids: ['three'] } });
	// Two people under one id that is new to the note.
	const both = append(noteId, [edit('four', 1, 4713), edit('five', 2, 4713)]);
	await expect(both).rejects.toMatchObject({ details: { ids: ['five'] } });
	expect((await updates.loadDocument(noteId)).seq).toBe(2);
	await append(noteId, [edit('two', 1, 4712), edit('six', 0, 4711)]);
	const { clients } = await updates.loadDocument(noteId);
	expect([clients.get(4711), clients.get(4712), clients.get(4713)]).toEqual([
		people[0]!.personId,
		people[1]!.personId,
		undefined,
	]);
});

test('each cell keeps who wrote in it last; moving a cell is no writing', async () => {
	const noteId = await makeNote();
	const [first, second] = placedCells((await updates.loadDocument(noteId)).doc).map(({ id }) => id);
	const authors = async () =>
		Object.fromEntries((await authorship.read(noteId)).map((row) => [row.cellId, row.name]));
	expect(await authors()).toEqual({ [first!]: 'Ada Example', [second!]: 'Ada Example' });
	await updates.change(noteId, people[1]!.personId, (doc) => {
		placedCells(doc)[1]!.text.insert(0, 'x');
	});
	let added = '';
	await updates.change(noteId, people[2]!.personId, (doc) => {
		added = addCell(doc, 'text', null, 'new');
	});
	await updates.change(noteId, people[2]!.personId, (doc) => {
		doc.getMap<Y.Map<unknown>>('cells').get(first!)!.set('order', 'zz');
	});
	expect(await authors()).toEqual({
		[first!]: 'Ada Example',
		[second!]: 'Ben Example',
		[added]: 'Cem Example',
	});
});

test('a snapshot and folding change nothing that a note says: content, state vector, authors, edits', async () => {
	const step = fc.record({
		who: fc.nat(2),
		pause: fc.constantFrom(0, 0.1, 3, 15),
		deed: fc.constantFrom('type', 'type', 'type', 'delete', 'add', 'remove'),
		at: fc.nat(50),
	});
	await fc.assert(
		fc.asyncProperty(
			fc.array(step, { minLength: 200, maxLength: 260 }),
			fc.nat(100),
			async (steps, tail) => {
				const noteId = await makeNote();
				const log = await LongLog.of(noteId);
				let time = 0;
				for (const { who, pause, deed, at } of steps) {
					time += pause;
					log.change(people[who]!, minutes(time), (doc) => {
						const placed = placedCells(doc);
						const chosen = placed[at % Math.max(1, placed.length)];
						if (!chosen || deed === 'add') addCell(doc, 'text', chosen?.id ?? null, 'new');
						else if (deed === 'remove' && placed.length > 1) removeCell(doc, chosen.id);
						else if (deed === 'delete') chosen.text.delete(0, Math.min(2, chosen.text.length));
						else chosen.text.insert(Math.min(at, chosen.text.length), 'word ');
					});
				}
				await log.write();
				const before = await standing(noteId);
				expect(before.content).toEqual(toContent(log.doc));
				await snapshot(noteId);
				for (let more = 0; more < tail; more += 1) {
					log.change(people[more % 3]!, minutes(time), (doc) =>
						placedCells(doc)[0]!.text.insert(0, '+'),
					);
				}
				await log.write();
				const grown = await standing(noteId);
				const count = (await stored(noteId)).rows;
				await fold(noteId);
				expect(await standing(noteId)).toEqual(grown);
				expect(await ofLog(noteId)).toEqual({ content: grown.content, vector: grown.vector });
				expect((await stored(noteId)).rows).toBeLessThan(count);
			},
		),
		{ numRuns: Number(process.env.LONG_RUNS ?? 3) },
	);
});

test('an hour of work of three people is folded to a few rows and stays small', async () => {
	const noteId = await makeNote();
	const log = await LongLog.of(noteId);
	const keys = 1000;
	for (let round = 0; round < 4; round += 1) {
		for (const [index, person] of people.slice(0, 2).entries()) {
			const start = round * 15;
			log.type(person, index, (key) => minutes(start + (key / keys) * 14), keys);
		}
	}
	const edits = log.rows.length;
	const raw = log.rows.reduce((sum, row) => sum + row.bytes.length, 0);
	await log.write();
	await snapshot(noteId);
	const before = await standing(noteId);
	await fold(noteId);
	expect(await standing(noteId)).toEqual(before);
	const { rows, bytes, state } = await stored(noteId);
	const content = JSON.stringify(before.content).length;
	expect(rows).toBeLessThan(30);
	expect(state).toBeLessThan(3 * content + 12 * edits);
	expect(bytes).toBeLessThan(raw);
});

test('rows of a note stay bounded however long it is worked on, and no candidate loses its place', async () => {
	const noteId = await makeNote();
	const log = await LongLog.of(noteId);
	for (let day = 0; day < 1500; day += 1) {
		log.change(people[day % 3]!, minutes(day * 1440), (doc) =>
			placedCells(doc)[0]!.text.insert(0, 'x'),
		);
	}
	await log.write();
	await snapshot(noteId);
	await owner(`insert into candidate (note_id, ordinal, seq, engine, content, results, digest, authors)
		values ('${noteId}', 1, 700, '', '{}', '{}', '', '[]')`);
	const after = await updates.authorsSince(noteId, 1500);
	const before = await standing(noteId);
	await fold(noteId);
	expect((await stored(noteId)).rows).toBeLessThan(1000);
	expect(await standing(noteId)).toEqual(before);
	expect(await updates.authorsSince(noteId, 1500)).toEqual(after);
	const ends = await db()
		.select({ seq: noteUpdate.seq })
		.from(noteUpdate)
		.where(and(eq(noteUpdate.noteId, noteId), eq(noteUpdate.seq, 700)));
	expect(ends).toHaveLength(1);
	const { rows: sums } = await db().execute(
		sql`select sum(edits)::int as edits from note_update where note_id = ${noteId}`,
	);
	expect(sums).toEqual([{ edits: 1501 }]);
});

test('no folding happens without a snapshot, and none that leaves somebody out, straddles or invents', async () => {
	const noteId = await makeNote();
	const log = await LongLog.of(noteId);
	for (let index = 0; index < 10; index += 1) {
		log.change(people[index % 2]!, minutes(index), (doc) =>
			placedCells(doc)[0]!.text.insert(0, 'x'),
		);
	}
	await log.write();
	const [ada, ben, cem] = people.map(({ personId }) => personId);
	const attempt = async (from: number, to: number, who: (string | undefined)[]) => {
		const names = sql`array[${sql.join(
			who.map((id) => sql`${id}`),
			sql`, `,
		)}]::text[]`;
		const bytes = sql`array[${sql.join(
			who.map(() => sql`${Buffer.of(0, 0)}`),
			sql`, `,
		)}]::bytea[]`;
		try {
			await db().execute(sql`select fold_updates(${noteId}, ${from}, ${to}, ${names}, ${bytes})`);
			return 'folded';
		} catch (error) {
			return ((error as Error).cause as Error).message;
		}
	};
	const before = await stored(noteId);
	expect(await attempt(2, 5, [ada, ben])).toBe('no snapshot covers the stretch');
	await snapshot(noteId);
	expect(await attempt(2, 5, [ada])).toBe('the stretch is not whole');
	expect(await attempt(2, 5, [ada, ben, cem])).toBe('the stretch is not whole');
	expect(await attempt(2, 50, [ada, ben])).toBe('no snapshot covers the stretch');
	expect(await attempt(8, 5, [ada, ben])).toBe('the stretch is not whole');
	expect((await stored(noteId)).rows).toBe(before.rows);
	expect(await attempt(2, 5, [ada, ben])).toBe('folded');
	expect(await attempt(3, 7, [ada, ben])).toBe('the stretch is not whole');
});

test('a failure at any statement of a folding or a snapshot leaves everything as it was', async () => {
	const noteId = await makeNote();
	const log = await LongLog.of(noteId);
	for (let index = 0; index < 240; index += 1) {
		log.change(people[index % 3]!, minutes(index / 10), (doc) =>
			placedCells(doc)[0]!.text.insert(0, 'x'),
		);
	}
	await log.write();
	await snapshot(noteId);
	const before = await standing(noteId);
	const rows = (await stored(noteId)).rows;
	await owner(
		`create function fail() returns trigger language plpgsql as $$ begin raise 'broken on purpose'; end $$`,
	);
	for (const [table, event] of [
		['note_update', 'delete'],
		['note_update', 'insert'],
		['note_snapshot', 'delete'],
	] as const) {
		await owner(
			`create trigger broken after ${event} on ${table} for each statement execute function fail()`,
		);
		await expect(fold(noteId)).rejects.toThrow();
		await owner(`drop trigger broken on ${table}`);
		expect(await standing(noteId)).toEqual(before);
		expect((await stored(noteId)).rows).toBe(rows);
	}
	for (const event of ['insert', 'delete'] as const) {
		await owner(
			`create trigger broken after ${event} on note_snapshot for each statement execute function fail()`,
		);
		await expect(snapshots.write(noteId, before.seq, Buffer.of(0, 0))).rejects.toThrow();
		await owner(`drop trigger broken on note_snapshot`);
		expect(await standing(noteId)).toEqual(before);
	}
	await fold(noteId);
	expect(await standing(noteId)).toEqual(before);
	expect((await stored(noteId)).rows).toBeLessThan(rows / 4);
});

test('a note of which updates are missing is not loaded', async () => {
	const noteId = await makeNote();
	const log = await LongLog.of(noteId);
	log.type(people[0]!, 0, () => minutes(0), 20);
	const [, lost] = log.rows.splice(4, 1);
	expect(lost).toBeUndefined();
	await log.write();
	await expect(updates.loadDocument(noteId)).rejects.toMatchObject({ code: 'unavailable' });
});
