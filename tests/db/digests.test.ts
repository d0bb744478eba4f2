import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';
import { eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { db } from '$lib/server/db/client';
import { signedEntry } from '$lib/server/db/schema/record';
import { candidate, revision, signOff } from '$lib/server/db/schema/review';
import { current } from '$lib/server/evaluation/store';
import { closePool } from '$lib/server/evaluation/pool';
import { seal } from '$lib/server/revisions/digest';
import * as policies from '$lib/server/revisions/policy';
import { digestOf } from '$lib/server/revisions/snapshot';
import { placedCells, seedContent } from '$lib/note/document';
import * as Y from 'yjs';
import { canonicalJson } from '../support/canonical';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';

const sha256 = (text: string) => createHash('sha256').update(text, 'utf8').digest('hex');

describe('canonical JSON', () => {
	// RFC 8785, 3.2.2 and 3.2.4: input and output of the example.
	const example = String.raw`{
		"numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
		"string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
		"literals": [null, true, false]
	}`;
	const written = String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`;

	// RFC 8785, 3.2.3: names and the order they must have.
	const names = String.raw`{
		"\u20ac": "Euro Sign", "\r": "Carriage Return", "\ufb33": "Hebrew Letter Dalet With Dagesh",
		"1": "One", "\ud83d\ude00": "Emoji: Grinning Face", "\u0080": "Control",
		"\u00f6": "Latin Small Letter O With Diaeresis"
	}`;
	const order = [
		'Carriage Return',
		'One',
		'Control',
		'Latin Small Letter O With Diaeresis',
		'Euro Sign',
		'Emoji: Grinning Face',
		'Hebrew Letter Dalet With Dagesh',
	];

	// RFC 8785, appendix B: IEEE 754 bits and how the number is written.
	const numbers: [string, string][] = [
		['0000000000000000', '0'],
		['8000000000000000', '0'],
		['0000000000000001', '5e-324'],
		['8000000000000001', '-5e-324'],
		['7fefffffffffffff', '1.7976931348623157e+308'],
		['ffefffffffffffff', '-1.7976931348623157e+308'],
		['4340000000000000', '9007199254740992'],
		['c340000000000000', '-9007199254740992'],
		['4430000000000000', '295147905179352830000'],
		['44b52d02c7e14af5', '9.999999999999997e+22'],
		['44b52d02c7e14af6', '1e+23'],
		['44b52d02c7e14af7', '1.0000000000000001e+23'],
		['444b1ae4d6e2ef4e', '999999999999999700000'],
		['444b1ae4d6e2ef4f', '999999999999999900000'],
		['444b1ae4d6e2ef50', '1e+21'],
		['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
		['3eb0c6f7a0b5ed8d', '0.000001'],
		['41b3de4355555553', '333333333.3333332'],
		['41b3de4355555554', '333333333.33333325'],
		['41b3de4355555555', '333333333.3333333'],
		['41b3de4355555556', '333333333.3333334'],
		['41b3de4355555557', '333333333.33333343'],
		['becbf647612f3696', '-0.0000033333333333333333'],
		['43143ff3c1cb0959', '1424953923781206.2'],
	];

	for (const [who, write] of [
		['the product', (value: unknown) => seal(value).canonical],
		['the test', canonicalJson],
	] as const) {
		test(`${who} writes the examples of RFC 8785 as they are published`, () => {
			expect(write(JSON.parse(example))).toBe(written);
			expect(Object.values(JSON.parse(write(JSON.parse(names))) as object).sort()).toEqual(
				[...order].sort(),
			);
			const at = order.map((name) => write(JSON.parse(names)).indexOf(name));
			expect(at).toEqual([...at].sort((a, b) => a - b));
			for (const [bits, text] of numbers) {
				expect(write(Buffer.from(bits, 'hex').readDoubleBE()), bits).toBe(text);
			}
			expect(() => write(Number.NaN)).toThrow();
			expect(() => write(Infinity)).toThrow();
		});
	}

	test('product and test write any JSON alike', () => {
		fc.assert(
			fc.property(fc.jsonValue({ stringUnit: 'grapheme' }), (value) => {
				expect(canonicalize(value)).toBe(canonicalJson(value));
			}),
			{ numRuns: 300 },
		);
	});
});

describe('a frozen revision', () => {
	let database: TestDatabase;
	let cast: Cast;
	beforeAll(async () => {
		database = await createDatabase();
		cast = await makeCast('Digest Bench');
	});
	afterAll(async () => {
		await closePool();
		await database.drop();
	});

	async function rows(noteId: string) {
		return await db()
			.select({ candidate, revision })
			.from(revision)
			.innerJoin(candidate, eq(candidate.id, revision.candidateId))
			.where(eq(revision.noteId, noteId))
			.orderBy(candidate.ordinal);
	}

	test('has digests that can be recomputed from its rows, and names the one before it', async () => {
		const { id, number } = await writeNote(cast.author);
		expect(await freeze(cast, number)).toBe('A');
		await edit(cast.author, id, 1, '\nI_q = V_in / 40 kohm  # Ω, µ and 測 are kept as they are');
		expect(await freeze(cast, number)).toBe('B');

		const frozen = await rows(id);
		expect(frozen.map((one) => one.revision.letter)).toEqual(['A', 'B']);
		let previous: { letter: string; digest: string } | undefined;
		for (const { candidate: snapshot, revision: made } of frozen) {
			const { content, results, engine, authors, ordinal, seq, details } = snapshot;
			const proposal = {
				format: 'halfdigit-candidate-2',
				...details,
				ordinal,
				seq,
				content,
				results,
				engine,
				authors,
				files: [],
			};
			expect(snapshot.digest).toBe(sha256(canonicalJson(proposal)));
			expect(details).toMatchObject({
				team: { id: cast.author.teamId, name: 'Digest Bench' },
				note: { id, number },
				letter: made.letter,
			});

			const signed = await db()
				.select({ signOff, entry: signedEntry })
				.from(signOff)
				.innerJoin(signedEntry, eq(signedEntry.index, signOff.entry))
				.where(eq(signOff.candidateId, snapshot.id))
				.orderBy(signedEntry.index);
			expect(signed.map((one) => one.signOff.meaning)).toEqual(['prepared', 'checked', 'approved']);
			expect(new Set(signed.map((one) => one.signOff.digest))).toEqual(new Set([snapshot.digest]));
			const canonical = canonicalJson({
				format: 'halfdigit-revision-2',
				team: details?.team,
				note: details?.note,
				letter: made.letter,
				proposal,
				candidate: snapshot.digest,
				policy: await policies.get(cast.author),
				review: [],
				signatures: signed.map(({ entry: { statement, keyId, signature } }) => ({
					statement: JSON.parse(statement) as unknown,
					keyId,
					signature,
				})),
				frozenAt: made.frozenAt.toISOString(),
				previous: previous?.digest ?? null,
				replaces: previous ? { letter: previous.letter, reason: details?.changes } : null,
			});
			expect(made.canonical).toBe(canonical);
			expect(made.digest).toBe(sha256(canonical));
			previous = made;
		}
	});

	test('keeps each signature with name, time in UTC with its source, and meaning', async () => {
		const { id, number } = await writeNote(cast.author, 'Signed');
		await freeze(cast, number);
		const [frozen] = await rows(id);
		const { signatures } = JSON.parse(frozen?.revision.canonical ?? '') as {
			signatures: { statement: Record<string, unknown> }[];
		};
		expect(signatures.map(({ statement }) => statement)).toMatchObject(
			[
				['prepared', 'Author Example', 'engineer'],
				['checked', 'Engineer Example', 'engineer'],
				['approved', 'Approver Example', 'approver'],
			].map(([meaning, name, role]) => ({
				meaning,
				signer: { name, role },
				time: expect.stringMatching(/^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/) as string,
				timeSource: 'clock of the database server',
				method: 'password',
			})),
		);
	});

	test('has the same candidate digest whichever history its document went through', async () => {
		const { id, number } = await writeNote(cast.author, 'Histories');
		await edit(cast.author, id, 1, '\nI = 1 mA');
		const { content } = await current(id);
		const again = new Y.Doc();
		seedContent(again, content);
		// Another document with ids of its own, in which the same was written in another order.
		const cells = placedCells(again).map(({ kind, source }, index) => ({
			id: content.cells[index]?.id ?? '',
			kind,
			source,
		}));
		const results = evaluate(cells, defaultOptions);
		const row = (written: typeof content, computed: typeof results) => ({
			ordinal: 1,
			seq: 1,
			content: written,
			results: computed,
			engine: computed.engine,
			authors: [],
			details: null,
		});
		const stored = (await current(id)).results;
		expect(digestOf(row({ title: content.title, cells }, results))).toBe(
			digestOf(row(content, stored)),
		);
		expect(number).toMatch(/^MN-/);
	});

	test('holds the results that its engine gives for its sources', async () => {
		const { id, number } = await writeNote(cast.author, 'Another');
		await freeze(cast, number);
		const [frozen] = await rows(id);
		const results = evaluate(frozen?.candidate.content.cells ?? [], defaultOptions);
		expect(results.quantities.V_out?.value).toBe(2.5);
		expect(canonicalJson(frozen?.candidate.results)).toBe(canonicalJson(results));
	});
});
