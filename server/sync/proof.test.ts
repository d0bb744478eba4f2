import { addCell, cellsOf, seedContent, titleOf, toContent } from '$lib/note/document';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import * as Y from 'yjs';
import { maxDocumentBytes, maxPendingBytes } from './limits';
import { Proof } from './proof';

const nobody = () => undefined;

function someNote(): Y.Doc {
	const doc = new Y.Doc();
	seedContent(doc, {
		title: 'Divider',
		cells: [
			{ kind: 'calculation', source: 'U = 5 V\nR = 2 kohm\n' },
			{ kind: 'text', source: 'Some text of a note' },
		],
	});
	return doc;
}

/** A copy of a note with a client of its own. */
function pageOf(doc: Y.Doc): Y.Doc {
	const page = new Y.Doc();
	Y.applyUpdate(page, Y.encodeStateAsUpdate(doc));
	return page;
}

/** The update that a change makes. */
function editOf(page: Y.Doc, change: (page: Y.Doc) => void): Uint8Array {
	const before = Y.encodeStateVector(page);
	page.transact(() => change(page));
	return Y.encodeStateAsUpdate(page, before);
}

const judge = (doc: Y.Doc, update: Uint8Array) => new Proof(doc).judge(update, 'ann', nobody);

describe('an edit is good', () => {
	test.each<[string, (page: Y.Doc) => void]>([
		['that types', (page) => titleOf(page).insert(3, 'x')],
		['that deletes', (page) => titleOf(page).delete(0, 3)],
		['that adds a cell', (page) => addCell(page, 'requirement', null, 'U < 6 V')],
		['that removes all cells', (page) => cellsOf(page).clear()],
		[
			'with parted surrogates',
			(page) => (titleOf(page).insert(1, '😀'), titleOf(page).insert(2, 'x')),
		],
	])('%s', (_, change) => {
		const doc = someNote();
		const page = pageOf(doc);
		expect(judge(doc, editOf(page, change))).toEqual({
			kind: 'good',
			clients: clientsOf(page, doc),
		});
	});

	test('that brings back by undo what was removed', () => {
		const doc = someNote();
		const page = pageOf(doc);
		const undo = new Y.UndoManager([titleOf(page), cellsOf(page)]);
		Y.applyUpdate(
			doc,
			editOf(page, () => cellsOf(page).clear()),
		);
		expect(
			judge(
				doc,
				editOf(page, () => undo.undo()),
			).kind,
		).toBe('good');
	});

	test('that says again what is known, or the whole document', () => {
		const doc = someNote();
		const page = pageOf(doc);
		const edit = editOf(page, () => titleOf(page).insert(0, 'New '));
		Y.applyUpdate(doc, edit);
		expect(judge(doc, edit)).toEqual({ kind: 'good', clients: [] });
		expect(judge(doc, Y.encodeStateAsUpdate(page))).toEqual({ kind: 'good', clients: [] });
	});
});

function clientsOf(page: Y.Doc, doc: Y.Doc): number[] {
	const before = Y.decodeStateVector(Y.encodeStateVector(doc));
	return [...Y.decodeStateVector(Y.encodeStateVector(page)).keys()].filter((id) => !before.has(id));
}

describe('an edit is refused', () => {
	test('under the client id of somebody else', () => {
		const doc = someNote();
		const page = pageOf(doc);
		const edit = editOf(page, () => titleOf(page).insert(0, 'x'));
		const owners = (id: number) => (id === page.clientID ? 'bob' : undefined);
		expect(new Proof(doc).judge(edit, 'ann', owners).kind).toBe('refused');
		expect(new Proof(doc).judge(edit, 'bob', owners).kind).toBe('good');
	});

	test.each<[string, (page: Y.Doc) => void]>([
		['other text', (page) => titleOf(page).insert(0, 'other')],
		['longer text', (page) => titleOf(page).insert(0, 'Otherwise longer')],
		['the same text elsewhere', (page) => titleOf(page).insert(2, 'first')],
		['the same text in a cell', (page) => textOf(page).insert(0, 'first')],
		['no text at all', (page) => addCell(page, 'text', null, 'first')],
	])('that restates what its client said before with %s', (_, change) => {
		const doc = someNote();
		const [one, two] = [pageOf(doc), pageOf(doc)];
		two.clientID = one.clientID;
		Y.applyUpdate(
			doc,
			editOf(one, () => titleOf(one).insert(0, 'first')),
		);
		const before = Y.encodeStateAsUpdate(doc);
		expect(judge(doc, editOf(two, change)).kind).toBe('refused');
		expect(Y.encodeStateAsUpdate(doc)).toEqual(before);
	});

	const deep = (levels: number): unknown => (levels === 0 ? 1 : { a: deep(levels - 1) });
	test.each<[string, (page: Y.Doc) => void]>([
		['another root', (page) => page.getMap('other').set('key', 1)],
		['a root with the name of a prototype', (page) => page.getMap('__proto__').set('key', 1)],
		['a cell with the name of a prototype', (page) => cellsOf(page).set('__proto__', new Y.Map())],
		[
			'a cell with a name every object has',
			(page) => cellsOf(page).set('constructor', new Y.Map()),
		],
		['a cell with a huge key', (page) => cellsOf(page).set('a'.repeat(100_000), new Y.Map())],
		['a cell that is a string', (page) => cellsOf(page).set('abc', 'text' as never)],
		['a kind there is none of', (page) => aCell(page).set('kind', 'song')],
		['a kind that is deep', (page) => aCell(page).set('kind', deep(500))],
		['a field there is none of', (page) => aCell(page).set('colour', 'red')],
		['a source that is a string', (page) => aCell(page).set('source', 'x')],
		['an order that is no key', (page) => aCell(page).set('order', '??')],
		['nested types', (page) => aCell(page).set('source', new Y.Map([['a', new Y.Map()]]))],
		['a picture in the title', (page) => titleOf(page).insertEmbed(0, { image: 'x' })],
		['a format', (page) => textOf(page).format(0, 3, { bold: true })],
	])('that brings %s', (_, change) => {
		const doc = someNote();
		const finding = judge(doc, editOf(pageOf(doc), change));
		expect(finding.kind).toBe('refused');
		expect(finding).toHaveProperty(
			'reason',
			expect.stringMatching(/^This change is not taken\. .+\.$/),
		);
	});

	test('that would make the note larger than a note may be', () => {
		const doc = someNote();
		doc.getText('bulk').insert(0, 'x'.repeat(maxDocumentBytes - 100_000));
		const page = new Y.Doc();
		const proof = new Proof(doc);
		const insert = (length: number) => {
			const edit = editOf(page, () => titleOf(page).insert(0, 'x'.repeat(length)));
			const { kind } = proof.judge(edit, 'ann', nobody);
			if (kind === 'good') Y.applyUpdate(doc, edit);
			return kind;
		};
		expect(insert(60_000)).toBe('good');
		expect(insert(60_000)).toBe('tooLarge');
		// What is taken out makes room again.
		doc.getText('bulk').delete(0, 200_000);
		expect(insert(60_000)).toBe('good');
	});

	test('that would make more wait than may', () => {
		const doc = someNote();
		const page = pageOf(doc);
		titleOf(page).insert(0, 'lost');
		const proof = new Proof(doc);
		const more = () => editOf(page, () => textOf(page).insert(0, 'x'.repeat(maxPendingBytes / 2)));
		expect(proof.judge(more(), 'ann', nobody).kind).toBe('good');
		Y.applyUpdate(doc, Y.encodeStateAsUpdate(doc));
		expect(proof.judge(more(), 'ann', nobody).kind).toBe('tooMuchPending');
	});
});

const aCell = (page: Y.Doc) => [...cellsOf(page).values()][0]!;
const textOf = (page: Y.Doc) => aCell(page).get('source') as Y.Text;

const mutants = Number(process.env.HALFDIGIT_LONG ? 50_000 : 3000);

test(`none of ${mutants} spoilt updates crashes, takes a second or half-applies`, () => {
	const doc = someNote();
	const page = pageOf(doc);
	const seeds = [
		Y.encodeStateAsUpdate(doc),
		editOf(page, () => titleOf(page).insert(2, 'some words')),
		editOf(page, () => addCell(page, 'text', null, 'more words')),
		editOf(page, () => titleOf(page).delete(1, 5)),
		editOf(page, () => titleOf(page).insertEmbed(0, { a: [1, null, 'x', { b: 2.5 }] })),
	];
	const proof = new Proof(doc);
	const contentOf = () => JSON.stringify(toContent(doc));
	let longest = 0;
	const spoilt = fc.record({
		seed: fc.nat(seeds.length - 1),
		cut: fc.nat(200),
		bytes: fc.array(fc.tuple(fc.nat(200), fc.integer({ min: 0, max: 255 })), { maxLength: 6 }),
		inserted: fc.uint8Array({ maxLength: 12 }),
		at: fc.nat(200),
	});
	fc.assert(
		fc.property(spoilt, ({ seed, cut, bytes, inserted, at }) => {
			const whole = seeds[seed]!;
			const update = Uint8Array.from([...whole.slice(0, at), ...inserted, ...whole.slice(at)]);
			for (const [index, byte] of bytes) update[index % update.length] = byte;
			const end = Math.max(1, update.length - (cut % 40));
			const before = contentOf();
			const start = performance.now();
			const finding = proof.judge(update.slice(0, end), 'ann', nobody);
			if (finding.kind === 'good') Y.applyUpdate(doc, update.slice(0, end));
			longest = Math.max(longest, performance.now() - start);
			if (finding.kind !== 'good') expect(contentOf()).toBe(before);
		}),
		{ numRuns: mutants },
	);
	expect(longest).toBeLessThan(1000);
});
