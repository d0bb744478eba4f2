import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { deflateSync, gzipSync } from 'node:zlib';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { NoteCell } from '$lib/note/document';
import * as threads from '$lib/server/comments/threads';
import { env } from '$lib/server/env';
import { closePool } from '$lib/server/evaluation/pool';
import * as paper from '$lib/server/paper/paper';
import { Press } from '$lib/server/paper/press';
import { closePress } from '$lib/server/paper/printing';
import * as revisions from '$lib/server/revisions/revisions';
import { download } from '$lib/server/revisions/sealed-file';
import { attachedRecords } from '$lib/server/signed-record/attached';
import * as dropped from '$lib/server/signed-record/dropped';
import { published } from '$lib/server/signed-record/publication';
import { createDatabase, type TestDatabase } from '../support/database';
import { freeze, writeNote } from '../support/note-life';
import { complaints, hasPoppler, lookInto } from '../support/pdf';
import { makeCast, type Cast } from '../support/people';
import { hasProgram } from '../support/programs';

/** Text that would be markup, a program, or nothing a font has, if it were read as anything but text. */
const hostile =
	'#panic("out") $#x$ @ref <label> \\ */ [link](javascript:alert(1)) #sys.inputs ' +
	'漢字 \u202e\u0007 😀 `raw` "quoted" #include "/etc/passwd"';

const cells: Omit<NoteCell, 'id'>[] = [
	{
		kind: 'text',
		source: `## Purpose\n\nIt gives {{V_out}}, as $V = \\frac{a}{b}$ says.\n\n- one\n- two\n\n| a | b |\n|---|---|\n| 1 | ${hostile.replaceAll('|', '')} |\n\n${hostile}`,
	},
	{
		kind: 'calculation',
		source: `V_in = tolerance(10 V, 1 %)  # ${hostile}\nV_out = V_in * 3 / (4 + 8)`,
	},
	{ kind: 'requirement', source: 'V_out <= 3 V  # the converter’s range' },
];

const folder = mkdtempSync(join(tmpdir(), 'halfdigit-paper-'));
let database: TestDatabase;
let cast: Cast;
let number: string;
let file: string;
let pdf: Buffer;

beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
	const note = await writeNote(cast.author, `Divider ${hostile}`, cells);
	number = note.number;
	await threads.open(cast.engineer, number, {
		cellId: 'abc',
		kind: 'question',
		blocking: false,
		body: `Is it loaded?\n${hostile}`,
	});
	await freeze(cast, number);
	file = await download(cast.reader, number, 'A');
	pdf = await paper.ofRevision(cast.reader, number, 'A', 'a4');
	writeFileSync(join(folder, 'keys.json'), JSON.stringify(await published()));
});
afterAll(async () => {
	closePress();
	await closePool();
	await database.drop();
	rmSync(folder, { recursive: true, force: true });
});

function script(bytes: Buffer): { genuine: boolean; said: string } {
	const path = join(folder, 'paper.pdf');
	writeFileSync(path, bytes);
	const { status, stdout } = spawnSync(
		process.execPath,
		['server/verify-revision.mjs', path, join(folder, 'keys.json')],
		{ encoding: 'utf8', env: {} },
	);
	return { genuine: status === 0, said: stdout };
}

describe.skipIf(!hasPoppler())('the paper of a revision', () => {
	test('shows all of it, and what people wrote as text', () => {
		const { text } = lookInto(pdf);
		// Where a line breaks is not what is looked at.
		const plain = (words: string) => words.replace(/\s+/g, '').toUpperCase();
		for (const said of [
			`MEASUREMENT NOTE ${number}, REVISION A`,
			'2.500 ± 0.028 V',
			'#panic("out") $#x$',
			'[U+6F22][U+5B57]',
			'[U+202E][U+0007]',
			'#include "/etc/passwd"',
			'Met,',
			'Uncertainty budgets',
			'rectangular',
			'Is it loaded?',
			'1 of 2',
			`END OF ${number}, REVISION A`,
		]) {
			expect(plain(text), said).toContain(plain(said));
		}
	});

	test('names each signer with time, zone and meaning, and the digest with where it is verified', async () => {
		const { revision } = await revisions.get(cast.reader, number, 'A');
		const plain = lookInto(pdf).text.replace(/\s+/g, ' ');
		for (const { meaning, name } of revision.signOffs) {
			expect(plain).toMatch(
				new RegExp(`${meaning} ${name} \\(\\w+\\) \\d+ \\w+ \\d{4}, \\d\\d:\\d\\d:\\d\\d UTC`, 'i'),
			);
		}
		expect(plain.replaceAll(' ', '')).toContain(revision.digest);
		expect(plain).toContain(`${env().ORIGIN}/r/${revision.digest.slice(0, 32)}`);
	});

	test('is tagged PDF/A-3 of the day of freezing, with its fonts, and carries the sealed record', async () => {
		const { revision } = await revisions.get(cast.reader, number, 'A');
		const { info, metadata, structure, fonts, list, attached } = lookInto(pdf);
		expect(info).toMatch(/Tagged:\s+yes/);
		expect(info).toMatch(/Page size:.*A4/);
		expect(info).toContain(revision.frozenAt.slice(0, 19));
		expect(metadata).toMatch(/pdfaid:part>3</);
		expect(metadata).toMatch(/pdfaid:conformance>A</);
		for (const tag of ['Document', 'H1', 'H2', 'Table', 'TH', 'Formula', 'Figure', 'L', 'P'])
			expect(structure, tag).toMatch(new RegExp(`^\\s*${tag}\\b`, 'm'));
		expect(fonts.length).toBeGreaterThan(3);
		for (const font of fonts) expect(font, font).toMatch(/yes yes yes/);
		expect(list).toContain('1 embedded files');
		expect(attached).toBe(file);
	});

	test('is set on Letter where that is asked for', async () => {
		const letter = await paper.ofRevision(cast.reader, number, 'A', 'us-letter');
		expect(lookInto(letter).info).toMatch(/Page size:\s+612 x 792/);
		expect((await dropped.file(letter)).paper).toBe('same');
	});
});

test.skipIf(!hasProgram('qpdf', 'qpdf', 'A check of the structure of PDFs'))(
	'qpdf finds nothing wrong with its structure',
	() => {
		expect(complaints(pdf)).toBe('');
	},
);

test('the same revision gives the same bytes, also in another process', async () => {
	const settings = { limitMs: 30_000, residentMegabytes: 900, mostWaiting: 5, idleMs: 1000 };
	const press = new Press({ entry: env().TYPESETTER_ENTRY, ...settings });
	try {
		const task = { file, paper: 'a4', origin: env().ORIGIN } as const;
		const other = await press.print({ ...task, paper: 'us-letter' });
		expect((await press.print(task)).equals(pdf)).toBe(true);
		expect((await press.print(task)).equals(pdf)).toBe(true);
		expect(other.equals(pdf)).toBe(false);
	} finally {
		press.close();
	}
});

test('verify finds the record in a PDF, and says whether the pages are its own', async () => {
	expect(await dropped.file(pdf)).toMatchObject({
		state: 'valid',
		paper: 'same',
		revision: { number, letter: 'A' },
	});
	expect(await dropped.file(gzipSync(pdf))).toMatchObject({ state: 'valid', paper: 'same' });
	const resaved = Buffer.concat([pdf, Buffer.from('\n% saved anew\n')]);
	expect(await dropped.file(resaved)).toMatchObject({ state: 'valid', paper: 'other' });
	const { genuine, said } = script(pdf);
	expect(said).toMatch(/Genuine/);
	expect(genuine).toBe(true);
	expect(said).toMatch(/pages/);
});

/** A PDF no program made, with these files attached. */
function pdfWith(...contents: { bytes: Buffer; dictionary: string }[]): Buffer {
	const objects = contents.flatMap(({ bytes, dictionary }, index) => [
		Buffer.from(`${index + 1} 0 obj\n<< /Type /EmbeddedFile ${dictionary} >>\nstream\n`),
		bytes,
		Buffer.from('\nendstream\nendobj\n'),
	]);
	return Buffer.concat([Buffer.from('%PDF-1.7\n'), ...objects, Buffer.from('%%EOF')]);
}
const deflated = (text: string, more = '') => {
	const bytes = deflateSync(text);
	return { bytes, dictionary: `/Filter /FlateDecode /Length ${bytes.length} ${more}` };
};

test('a byte altered in the attached record is found, on the page and by the script', async () => {
	const at = file.indexOf('V_out');
	const altered = `${file.slice(0, at)}V_oot${file.slice(at + 5)}`;
	const forged = pdfWith(deflated(altered));
	expect(await dropped.file(forged)).toMatchObject({ state: 'altered', revision: null });
	expect(script(forged).genuine).toBe(false);
	const genuine = pdfWith(deflated(file));
	expect(await dropped.file(genuine)).toMatchObject({ state: 'valid', paper: 'other' });
	expect(script(genuine).genuine).toBe(true);
	const plain = Buffer.from(file);
	const stored = pdfWith({ bytes: plain, dictionary: `/Length ${plain.length}` });
	expect((await dropped.file(stored)).state).toBe('valid');
});

test('a PDF with two records, with none, or made to take all memory is refused with a sentence', async () => {
	const other = file.replace('"letter":"A"', '"letter":"B"');
	const refused = {
		code: 'invalid',
		message: expect.stringMatching(/^This PDF carries/) as string,
	};
	const two = pdfWith(deflated(file), deflated(other));
	await expect(dropped.file(two)).rejects.toMatchObject(refused);
	expect(script(two).genuine).toBe(false);
	for (const hostilePdf of [
		pdfWith(),
		pdfWith(deflated('{"format":"another"}')),
		pdfWith({ bytes: deflateSync(Buffer.alloc(200_000_000)), dictionary: '/Filter /FlateDecode' }),
		pdfWith({ bytes: Buffer.from('no deflated data'), dictionary: '/Filter /FlateDecode' }),
		Buffer.from(`%PDF-1.7\n${'/EmbeddedFile '.repeat(200_000)}`),
		Buffer.from(`%PDF-1.7\n${'1 0 obj << /EmbeddedFile >> stream\n'.repeat(100_000)}`),
	]) {
		const from = performance.now();
		await expect(dropped.file(hostilePdf)).rejects.toMatchObject(refused);
		expect(performance.now() - from).toBeLessThan(2000);
		expect(script(hostilePdf).genuine).toBe(false);
	}
	expect(await attachedRecords(pdfWith(deflated(file), deflated(file)), 1e8)).toEqual([file]);
});

test('no paper is made of a record that is not what was sealed', async () => {
	const altered = file.replace('Release of the board', 'Release of the bored');
	await expect(paper.printGenuine(altered, 'a4')).rejects.toMatchObject({
		code: 'conflict',
		message: expect.stringContaining('not what was sealed') as string,
	});
});

test('what takes too long, or ends by itself, fails alone with a sentence, and the next paper is made', async () => {
	const settings = { residentMegabytes: 900, mostWaiting: 1, idleMs: 1000 };
	const task = { file, paper: 'a4', origin: env().ORIGIN } as const;
	const hasty = new Press({ entry: env().TYPESETTER_ENTRY, limitMs: 1, ...settings });
	await expect(hasty.print(task)).rejects.toMatchObject({ code: 'unavailable' });
	hasty.close();
	const press = new Press({ entry: env().TYPESETTER_ENTRY, limitMs: 30_000, ...settings });
	try {
		const first = press.print({ ...task, file: '{"no":"revision"}' });
		await expect(press.print(task)).rejects.toMatchObject({
			message: expect.stringMatching(/^Many PDFs/) as string,
		});
		await expect(first).rejects.toMatchObject({ code: 'unavailable' });
		expect((await press.print(task)).equals(pdf)).toBe(true);
	} finally {
		press.close();
	}
});
