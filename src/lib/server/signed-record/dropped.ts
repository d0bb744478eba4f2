import { promisify } from 'node:util';
import { gunzip } from 'node:zlib';
import { AppError } from '$lib/errors';
import type { SignOff, Withdrawal } from '$lib/schemas/review';
import { desc, eq } from 'drizzle-orm';
import { db } from '../db/client';
import { candidate, revision, withdrawal } from '../db/schema/review';
import { seal } from '../revisions/digest';
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
}

/** Bytes of a file after it is unpacked. */
const maxBytes = 32_000_000;

/** Verifies a file: canonical JSON with its seal, plain or packed with gzip. */
export async function file(bytes: Buffer): Promise<Outcome> {
	const text = await textOf(bytes);
	const known = await knownKeys();
	const { value, canonical } = parse(text);
	const checked = check(value, known);
	const faults = canonical ? checked.faults : ['It was written anew.', ...checked.faults];
	if (!checked.revision || (faults.length > 0 && !checked.foreign)) return altered(checked, faults);
	if (checked.foreign) return { ...altered(checked, faults), state: 'unknown' };
	return standing(checked.digest, checked);
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

/** The installation's public keys by their id. */
export async function knownKeys(): Promise<KnownKeys> {
	return new Map((await entries.keysOf(db())).map(({ id, publicKey }) => [id, publicKey]));
}

async function textOf(bytes: Buffer): Promise<string> {
	if (bytes.length === 0) throw new AppError('invalid', 'The file is empty.');
	const packed = bytes[0] === 0x1f && bytes[1] === 0x8b;
	const plain = packed ? await unpack(bytes) : bytes;
	return attachedJson(plain) ?? plain.toString('utf8');
}

/** The JSON attached to a PDF; undefined where the file is none. Halfdigit's own print does not attach it yet. */
function attachedJson(bytes: Buffer): string | undefined {
	if (bytes.subarray(0, 5).toString('latin1') !== '%PDF-') return undefined;
	throw new AppError(
		'invalid',
		'This PDF carries no revision. Drop the JSON file of the revision, or type the digest that is printed.',
	);
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
		const signers = given?.revision ? signersOf(given.revision) : [];
		return { state: 'unknown', faults, revision: null, signers, withdrawn: null };
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
	return {
		state: taken ? 'withdrawn' : (await newestLetter(noteId)) === letter ? 'valid' : 'superseded',
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
