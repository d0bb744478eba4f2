import { promisify } from 'node:util';
import { gunzip } from 'node:zlib';
import { AppError } from '$lib/errors';
import type { SignOff, Withdrawal } from '$lib/schemas/review';
import { desc, eq, like } from 'drizzle-orm';
import { db } from '../db/client';
import { candidate, revision, withdrawal } from '../db/schema/review';
import { print } from '../paper/printing';
import { seal } from '../revisions/digest';
import { attachedRecords, isPdf } from './attached';
import * as entries from './entries';
import { check, signersOf, type Checked, type KnownKeys } from './sealed';

/** What somebody without an account learns of a file or a digest: nothing that the file does not say itself. */
export interface Outcome {
	state: 'valid' | 'superseded' | 'withdrawn' | 'unknown' | 'altered';
	/** What does not fit, a sentence each. */
	faults: string[];
	revision: { number: string; letter: string; frozenAt: string; digest: string } | null;
	signers: SignOff[];
	withdrawn: Withdrawal | null;
	/** Letter of the note's newest revision where this one is superseded. */
	newest?: string;
	/**
	 * Of a PDF whose attached record is genuine: whether the whole file is what this installation makes of the record
	 * (`same`), is not (`other`), or could not be made to compare with (`unknown`).
	 */
	paper?: 'same' | 'other' | 'unknown';
}

/** Bytes of a file after it is unpacked. */
const maxBytes = 32_000_000;

/** Verifies a file: canonical JSON with its seal, or a PDF that has it attached, plain or packed with gzip. */
export async function file(bytes: Buffer): Promise<Outcome> {
	const plain = await unpacked(bytes);
	if (!isPdf(plain)) return record(plain.toString('utf8'));
	const text = await attachedRecord(plain);
	const outcome = await record(text);
	return outcome.revision ? { ...outcome, paper: await comparePaper(plain, text) } : outcome;
}

async function record(text: string): Promise<Outcome> {
	const known = await knownKeys();
	const { value, canonical } = parse(text);
	const checked = check(value, known);
	const faults = canonical ? checked.faults : ['It was written anew.', ...checked.faults];
	if (!checked.revision || (faults.length > 0 && !checked.foreign)) return altered(checked, faults);
	if (checked.foreign) return { ...altered(checked, faults), state: 'unknown' };
	return standing(checked.digest, checked);
}

/** Sets the pages anew and compares every byte; only of a record that is genuine and this installation's own. */
async function comparePaper(pdf: Buffer, text: string): Promise<Outcome['paper']> {
	try {
		for (const paper of ['a4', 'us-letter'] as const)
			if (pdf.equals(await print(text, paper))) return 'same';
		return 'other';
	} catch (thrown) {
		if (thrown instanceof AppError) return 'unknown';
		throw thrown;
	}
}

/** Verifies a digest as it is printed, spaces and all. */
export async function digest(typed: string): Promise<Outcome> {
	const wanted = typed
		.toLowerCase()
		.replace(/^sha-?256:?/, '')
		.replace(/\s/g, '');
	if (!/^[0-9a-f]{64}$/.test(wanted)) {
		throw new AppError('invalid', 'A digest has 64 digits from 0 to 9 and a to f.');
	}
	return standing(wanted, undefined);
}

/** Verifies the beginning of a digest, 32 digits, as a QR code on paper holds it. */
export async function beginning(digits: string): Promise<Outcome> {
	if (!/^[0-9a-f]{32}$/.test(digits)) return nothing([]);
	const [found] = await db()
		.select({ digest: revision.digest })
		.from(revision)
		.where(like(revision.digest, `${digits}%`));
	return found ? standing(found.digest, undefined) : nothing([]);
}

/** The installation's public keys by their id. */
export async function knownKeys(): Promise<KnownKeys> {
	return new Map((await entries.keysOf(db())).map(({ id, publicKey }) => [id, publicKey]));
}

async function unpacked(bytes: Buffer): Promise<Buffer> {
	if (bytes.length === 0) throw new AppError('invalid', 'The file is empty.');
	const packed = bytes[0] === 0x1f && bytes[1] === 0x8b;
	return packed ? await unpack(bytes) : bytes;
}

/** The one sealed record attached to a PDF. */
async function attachedRecord(pdf: Buffer): Promise<string> {
	const [text, second] = await attachedRecords(pdf, maxBytes);
	if (text === undefined) {
		throw new AppError(
			'invalid',
			'This PDF carries no revision. Drop the JSON file of the revision, or type the digest that is printed.',
		);
	}
	if (second !== undefined) {
		throw new AppError(
			'invalid',
			'This PDF carries more than one record, so nobody can tell which one its pages show. Drop the JSON file of the revision.',
		);
	}
	return text;
}

async function unpack(bytes: Buffer): Promise<Buffer> {
	try {
		return await promisify(gunzip)(bytes, { maxOutputLength: maxBytes });
	} catch (cause) {
		throw new AppError('invalid', 'The file cannot be unpacked, or it is too large.', { cause });
	}
}

function parse(text: string): { value: unknown; canonical: boolean } {
	try {
		const value: unknown = JSON.parse(text);
		return { value, canonical: seal(value).canonical === text };
	} catch {
		return { value: undefined, canonical: true };
	}
}

function nothing(faults: string[]): Outcome {
	return { state: 'unknown', faults, revision: null, signers: [], withdrawn: null };
}

function altered({ revision: sealed }: Checked, faults: string[]): Outcome {
	const signers = sealed ? signersOf(sealed) : [];
	return { state: 'altered', faults, revision: null, signers, withdrawn: null };
}

/** Where a revision of this digest stands here. What is stored is checked like a file before anything is said of it. */
async function standing(wanted: string, given: Checked | undefined): Promise<Outcome> {
	const [found] = await db()
		.select({ revision, withdrawal })
		.from(revision)
		.leftJoin(withdrawal, eq(withdrawal.revisionId, revision.id))
		.where(eq(revision.digest, wanted));
	const entry = found?.revision.entry ?? null;
	if (!found || entry === null) {
		const faults = given
			? ['Its signatures are genuine, but this installation does not have it.']
			: [];
		return { ...nothing(faults), signers: given?.revision ? signersOf(given.revision) : [] };
	}
	const { letter, noteId, frozenAt, canonical } = found.revision;
	const [own] = await entries.read(db(), [entry]);
	const stored = check(
		{
			format: 'halfdigit-sealed-revision-1',
			revision: JSON.parse(canonical) as unknown,
			seal: own,
		},
		await knownKeys(),
	);
	if (!stored.revision || stored.faults.length > 0 || stored.digest !== wanted) {
		return altered(stored, ['What this installation has stored was altered.', ...stored.faults]);
	}
	const taken = found.withdrawal;
	const newest = await newestLetter(noteId);
	const isNewest = newest === letter;
	return {
		...(newest !== undefined && !isNewest && { newest }),
		state: taken ? 'withdrawn' : isNewest ? 'valid' : 'superseded',
		faults: [],
		revision: {
			number: stored.revision.revision.note.number,
			letter,
			frozenAt: frozenAt.toISOString(),
			digest: wanted,
		},
		signers: signersOf(stored.revision),
		withdrawn: taken && {
			name: taken.personName,
			at: taken.at.toISOString(),
			reason: taken.reason,
		},
	};
}

async function newestLetter(noteId: string): Promise<string | undefined> {
	const [row] = await db()
		.select({ letter: revision.letter })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(eq(revision.noteId, noteId))
		.orderBy(desc(candidate.ordinal))
		.limit(1);
	return row?.letter;
}
