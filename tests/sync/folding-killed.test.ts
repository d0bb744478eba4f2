import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { placedCells, toContent } from '$lib/note/document';
import { takeUpdates } from '$lib/note/take-updates';
import { db } from '$lib/server/db/client';
import * as updates from '$lib/server/notes/updates';
import type { Actor } from '$lib/server/auth/access';
import { LongLog } from '../support/long-log';
import { eventually, openPage, saved, type } from '../support/page';
import { makeMember } from '../support/people';
import { startSyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

const kills = process.env.HALFDIGIT_LONG ? 40 : 3;
const sessions = 10 * kills;
const keysEach = 30;
/** Edits that make the log long enough for upkeep. */
const edits = 510;

let bench: SyncBench;
let people: Actor[];
beforeAll(async () => {
	bench = await startSyncBench();
	people = [bench.engineer, await makeMember(bench.engineer, 'approver')];
});
afterAll(() => bench.close());

/** A note with sessions of work from long ago, two people in each, of which no snapshot was ever made. */
async function oldNote(): Promise<string> {
	const noteId = await bench.makeNote('a = 1\n');
	const log = await LongLog.of(noteId);
	for (let session = 0; session < sessions; session += 1) {
		const start = Date.UTC(2020, 0, 6, 8) + session * 3_600_000;
		for (let key = 0; key < keysEach; key += 1) {
			log.change(people[key % 2]!, new Date(start + key * 1000), (doc) => {
				const { text } = placedCells(doc)[0]!;
				if (key % 7 === 6) text.delete(0, 1);
				else text.insert(text.length, `# ${session} ${key}\n`);
			});
		}
	}
	await log.write();
	return noteId;
}

/** Fresh edits, so many that a process makes a snapshot and folds at the next; gives the text after them. */
async function typeMore(noteId: string): Promise<string> {
	const log = await LongLog.of(noteId);
	log.type(people[0]!, 0, () => new Date(), edits);
	await log.write();
	return placedCells(log.doc)[0]!.text.toJSON();
}

async function rowsOf(noteId: string) {
	const { rows } = await db().execute<{ all: number; folded: number; edits: number }>(sql`
		select count(*)::int as all, (count(*) filter (where first_seq is not null))::int as folded,
			sum(edits)::int as edits
		from note_update where note_id = ${noteId}`);
	return rows[0]!;
}

const vectorOf = (doc: Y.Doc) => Object.fromEntries(Y.decodeStateVector(Y.encodeStateVector(doc)));

/** What the stored log says by itself, what is loaded (from snapshot and tail), and who wrote. */
async function standing(noteId: string) {
	const ofLog = new Y.Doc();
	const rows = await updates.rowsSince(noteId, 0);
	takeUpdates(
		ofLog,
		rows.map(({ bytes }) => bytes),
		'log',
	);
	const { doc, seq } = await updates.loadDocument(noteId);
	expect(toContent(doc)).toEqual(toContent(ofLog));
	expect(vectorOf(doc)).toEqual(vectorOf(ofLog));
	return {
		content: toContent(doc),
		vector: vectorOf(doc),
		seq,
		authors: (await updates.authorsSince(noteId, 0)).map(({ id }) => id).sort(),
	};
}

test(`a process killed ${kills} times in the middle of folding leaves a note that says the same`, async () => {
	const noteId = await oldNote();
	// Each stretch takes its time, so that the kill comes inside one, before it or behind it.
	await bench.asOwner(`create function linger() returns trigger language plpgsql
		as $$ begin perform pg_sleep(0.02); return null; end $$`);
	for (const event of ['delete', 'insert'])
		await bench.asOwner(`create trigger linger_${event} after ${event} on note_update
			for each statement execute function linger()`);
	const before = await rowsOf(noteId);
	let seen = before.folded;
	for (let kill = 1; kill <= kills; kill += 1) {
		const text = await typeMore(noteId);
		const server = await startSyncServer();
		const page = await openPage(server, { noteId, cookie: bench.cookie });
		type(page, page.cells[0]!.id, '+');
		await saved(page);
		await eventually(async () => (await rowsOf(noteId)).folded > seen);
		await server.stop('SIGKILL');
		page.destroy();
		const at = await rowsOf(noteId);
		seen = at.folded;
		expect(at.edits).toBe(before.edits + kill * (edits + 1));
		const now = await standing(noteId);
		expect(now.content.cells[0]!.source).toBe(`${text}+`);
		expect(now.authors).toEqual(people.map(({ personId }) => personId).sort());
	}
	await bench.asOwner('drop function linger cascade');
	const text = await typeMore(noteId);
	const server = await startSyncServer();
	const page = await openPage(server, { noteId, cookie: bench.cookie });
	type(page, page.cells[0]!.id, '.');
	await saved(page);
	await eventually(async () => (await rowsOf(noteId)).folded === 2 * sessions);
	page.destroy();
	expect(await server.stop()).toBe(0);
	expect((await standing(noteId)).content.cells[0]!.source).toBe(`${text}.`);
}, 600_000);
