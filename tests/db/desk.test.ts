import { afterAll, beforeAll, expect, test } from 'vitest';
import type { ShelfName } from '$lib/schemas/desk';
import type { Actor } from '$lib/server/auth/access';
import * as threads from '$lib/server/comments/threads';
import * as desk from '$lib/server/desk/desk';
import { closePool } from '$lib/server/evaluation/pool';
import * as store from '$lib/server/evaluation/store';
import * as candidates from '$lib/server/revisions/candidates';
import { createDatabase, type TestDatabase } from '../support/database';
import { check, freeze, proposal, seen, writeNote } from '../support/note-life';
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

const day = new Date('2026-10-14T09:00:00Z');

/** The notes on somebody's desk, by shelf; empty shelves are left out. */
async function deskOf(actor: Actor): Promise<Partial<Record<ShelfName, string[]>>> {
	const shelves = await desk.read(actor, day);
	return Object.fromEntries(
		shelves
			.filter(({ items }) => items.length > 0)
			.map(({ name, items }) => [name, items.map(({ number }) => number)]),
	);
}

test('a candidate waits for whoever is asked, by its day; then for the approver; then for nobody', async () => {
	const late = await writeNote(cast.author, 'Late');
	const soon = await writeNote(cast.author, 'Soon');
	const anybody = await writeNote(cast.author, 'Anybody');
	const { personId: checker } = cast.engineer;
	await candidates.propose(cast.author, soon.number, {
		...proposal({ checkers: [checker], approver: cast.approver.personId, due: '2026-10-20' }),
	});
	await candidates.propose(
		cast.author,
		late.number,
		proposal({ checkers: [checker], due: '2026-10-13', purpose: 'Board for the weir' }),
	);
	await candidates.propose(cast.author, anybody.number, proposal());

	expect(await deskOf(cast.engineer)).toEqual({
		check: [late.number, soon.number, anybody.number],
	});
	const [first, second] = (await desk.read(cast.engineer, day))[0]?.items ?? [];
	expect(first).toMatchObject({ what: 'Board for the weir', due: '2026-10-13', isLate: true });
	expect(second).toMatchObject({ href: `/notes/${soon.number}/candidate`, isLate: false });
	// Those nobody in particular was asked to check wait for all who may, and for no author.
	expect(await deskOf(cast.second)).toEqual({ check: [anybody.number] });
	expect(await deskOf(cast.author)).toEqual({});
	expect(await deskOf(cast.administrator)).toEqual({});

	for (const { number } of [late, soon]) await check(cast, number);
	expect(await deskOf(cast.engineer)).toEqual({ check: [anybody.number] });
	expect(await deskOf(cast.approver)).toEqual({
		check: [anybody.number],
		approve: [soon.number, late.number].sort((a) => (a === late.number ? -1 : 1)),
	});
	expect(await deskOf(cast.second)).toEqual({ check: [anybody.number], approve: [late.number] });
	for (const { number } of [late, soon, anybody]) {
		if (number === anybody.number) await check(cast, number);
		await candidates.approve(cast.approver, number, await seen(cast.approver, number));
	}
	expect(await deskOf(cast.approver)).toEqual({});
});

test('what came back, what blocks and what is not met waits for those who write the note, until it is settled', async () => {
	const note = await writeNote(cast.author, 'Divider', [
		{ kind: 'calculation', source: 'V_s = 5 V' },
		{ kind: 'requirement', source: 'V_s < 3 V' },
	]);
	await store.current(note.id);
	await candidates.propose(cast.author, note.number, proposal());
	await candidates.sendBack(cast.engineer, note.number, {
		...(await seen(cast.engineer, note.number)),
		reason: 'The limit is not met.',
	});
	const thread = await threads.open(cast.engineer, note.number, {
		cellId: (await candidates.get(cast.author, note.number)).candidate.content.cells[0]!.id,
		kind: 'correction',
		blocking: true,
		body: `Which supply is it? ${'It is not said anywhere in this note. '.repeat(8)}`,
	});
	const shelves = await desk.read(cast.author, day);
	const of = (name: ShelfName) => shelves.find((shelf) => shelf.name === name)?.items;
	expect(of('returned')).toMatchObject([{ what: 'Engineer Example: The limit is not met.' }]);
	expect(of('requirements')).toMatchObject([{ what: 'one requirement not met' }]);
	expect(of('blocking')).toHaveLength(1);
	expect(of('blocking')?.[0]?.what).toMatch(/^Engineer Example: Which supply is it\? .{40,70} …$/);
	expect(of('blocking')?.[0]?.href).toBe(`/notes/${note.number}#cell-${thread.cellId}`);
	expect(await deskOf(cast.engineer)).toEqual({});

	await threads.setClosed(cast.author, note.number, thread.id, true);
	expect(await deskOf(cast.author)).toEqual({
		returned: [note.number],
		requirements: [note.number],
	});
});

test('a frozen note waits for nobody, another team’s for nobody here, and a reader has no desk', async () => {
	const note = await writeNote(cast.author, 'Frozen');
	await freeze(cast, note.number);
	const others = await makeCast('Another bench');
	const foreign = await writeNote(others.author, 'Foreign');
	await candidates.propose(others.author, foreign.number, proposal());
	const seenHere = Object.values(await deskOf(cast.engineer)).flat();
	expect(seenHere).not.toContain(note.number);
	expect(await deskOf(others.engineer)).toEqual({ check: [foreign.number] });
	expect((await desk.read(cast.engineer, day)).flatMap(({ items }) => items)).toEqual([]);
	await expect(desk.read(cast.reader)).rejects.toMatchObject({ code: 'forbidden' });
});
