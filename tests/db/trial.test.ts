import { afterAll, beforeAll, expect, test } from 'vitest';
import { newComment, newThread } from '$lib/schemas/comments';
import { trialRequest } from '$lib/schemas/trial';
import * as threads from '$lib/server/comments/threads';
import { closePool } from '$lib/server/evaluation/pool';
import { current } from '$lib/server/evaluation/store';
import * as revisions from '$lib/server/revisions/revisions';
import * as sealedFile from '$lib/server/revisions/sealed-file';
import * as quantities from '$lib/server/quantities/quantities';
import * as keptTrials from '$lib/server/trial/kept-trials';
import * as trial from '$lib/server/trial/trial';
import * as updates from '$lib/server/notes/updates';
import { setShown } from '$lib/note/shown';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, writeNote } from '../support/note-life';
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

const changes = [{ name: 'V_in', from: '10 V', to: '14 V' }];
const plain = (text: string | null | undefined) => text?.replaceAll('\u00a0', ' ');

test('the server says what changed inputs move, and the note stays as it is', async () => {
	const { id, number } = await writeNote(cast.author);
	const before = await current(id);
	const answer = await trial.evaluate(cast.administrator, number, [
		...changes,
		{ name: 'V_gone', from: '1 V', to: '2 V' },
	]);
	expect(
		answer.quantities.map(({ name, before: was, after, difference, share }) => [
			name,
			plain(was?.text),
			plain(after?.text),
			plain(difference),
			share,
		]),
	).toEqual([
		['V_in', '10 V', '14 V', '+4 V', 0.4],
		['V_out', '2.5 V', '3.5 V', '+1 V', 0.4],
	]);
	expect(answer.requirements).toMatchObject([
		{ before: { verdict: 'met' }, after: { verdict: 'not met' } },
	]);
	expect(answer.figures).toHaveLength(1);
	expect(answer.gone).toEqual(['V_gone']);
	const after = await current(id);
	expect([after.seq, after.content]).toEqual([before.seq, before.content]);
	for (const to of ['1 V\n2 V', '1 V # note', '']) {
		const asked = { changes: [{ name: 'V_in', from: '10 V', to }] };
		expect(trialRequest.safeParse(asked).success, to).toBe(false);
	}
	expect(trialRequest.safeParse({ changes: [...changes, ...changes] }).success).toBe(false);
});

test('the interval of an input in doubt is its worst case', async () => {
	const source = 'R1 = tolerance(100 kohm, 1 %)\nU1 = normal(5 V, 1 mV)\nx = R1 * 2\ny = 3 V';
	const { number } = await writeNote(cast.author, 'Ranges', [{ kind: 'calculation', source }]);
	const ranges = await trial.ranges(cast.engineer, number);
	expect(Object.keys(ranges)).toEqual(['R1', 'U1']);
	expect(ranges.U1?.lower).toBeCloseTo(4.997);
	expect((ranges.R1?.upper ?? 0) / (ranges.R1?.lower ?? 1)).toBeCloseTo(101 / 99);
});

test('a kept trial is its person’s own', async () => {
	const { number } = await writeNote(cast.author);
	const kept = await keptTrials.keep(cast.engineer, number, { title: 'High', changes });
	expect(await keptTrials.list(cast.engineer, number)).toEqual([kept]);
	expect(await keptTrials.list(cast.author, number)).toEqual([]);
	await expect(keptTrials.remove(cast.author, number, kept.id)).rejects.toMatchObject({
		code: 'notFound',
	});
	const other = await writeNote(cast.author);
	await expect(keptTrials.remove(cast.engineer, other.number, kept.id)).rejects.toMatchObject({
		code: 'notFound',
	});
	await keptTrials.remove(cast.engineer, number, kept.id);
	expect(await keptTrials.list(cast.engineer, number)).toEqual([]);
});

test('a comment keeps its trial with the figures of then, and the frozen record keeps both', async () => {
	const { id, number } = await writeNote(cast.author);
	const cellId = (await current(id)).content.cells[1]!.id;
	const said = newThread.parse({
		...{ cellId, kind: 'question', blocking: false, body: 'And with 14 V?' },
		trial: changes,
	});
	const opened = await threads.open(cast.engineer, number, said);
	const attached = opened.comments[0]?.trial;
	expect(attached).toMatchObject({
		changes,
		figures: [{ name: 'V_in' }, { name: 'V_out', share: 0.4 }],
		verdicts: [
			{ requirement: 'V_out <= 3 V', before: { verdict: 'met' }, after: { verdict: 'not met' } },
		],
	});
	await threads.reply(cast.author, number, opened.id, newComment.parse({ body: 'No.' }));
	await edit(cast.author, id, 1, '\nx = 1');
	const [thread] = await threads.list(cast.approver, number);
	expect(thread?.comments.map((one) => one.trial)).toEqual([attached, undefined]);
	expect(thread?.comments[1]).not.toHaveProperty('trial');

	await freeze(cast, number);
	const file = await sealedFile.download(cast.author, number, 'A');
	const { revision } = JSON.parse(file) as {
		revision: { review: { comments: { trial?: unknown }[] }[] };
	};
	expect(revision.review[0]?.comments.map((one) => one.trial)).toEqual([attached, undefined]);
});

test('how readouts are set is frozen with the content, and is absent where nobody chose it', async () => {
	const { id, number } = await writeNote(cast.author);
	expect((await current(id)).content).not.toHaveProperty('shown');
	await updates.change(id, cast.author.personId, (doc) =>
		setShown(doc, 'V_out', { unit: 'mV', digits: 5 }),
	);
	const { content, results } = await current(id);
	expect(content.shown).toEqual({ V_out: { unit: 'mV', digits: 5 } });
	expect(plain(results.quantities.V_out?.text)).toBe('2500.0 mV');
	await freeze(cast, number);
	const frozen = await revisions.get(cast.author, number, 'A');
	expect(frozen.content.shown).toEqual(content.shown);
	expect(plain(frozen.results.figures[0]?.readout?.text)).toBe('2500.0 mV');
	const { choices, typed } = await quantities.units(cast.author, number, 'V_out', 'kohm');
	expect(choices.map(({ text }) => text)).toContain('mV');
	expect(typed).toMatch(/cannot express/);
});

test('readers of frozen revisions try nothing, and notes of another team are not there', async () => {
	const { number } = await writeNote(cast.author);
	const others = await makeCast('Another team');
	for (const [actor, code] of [
		[cast.reader, 'forbidden'],
		[others.engineer, 'notFound'],
	] as const) {
		for (const deed of [
			() => trial.evaluate(actor, number, changes),
			() => trial.ranges(actor, number),
			() => keptTrials.list(actor, number),
			() => keptTrials.keep(actor, number, { title: 'x', changes }),
			() => keptTrials.remove(actor, number, number),
			() => quantities.units(actor, number, 'V_out', null),
			() =>
				threads.open(actor, number, {
					...{ cellId: 'a', kind: 'question', blocking: false, body: 'Hm.' },
					trial: changes,
				}),
		]) {
			await expect(deed()).rejects.toMatchObject({ code });
		}
	}
});
