import type { SignOff } from '$lib/schemas/review';
import { z } from 'zod';
import { seal } from '../revisions/digest';
import * as keys from './keys';
import { entryBytes, type SignedStatement } from './statement';

const text = z.string();
const hash = z.string().regex(/^[0-9a-f]{64}$/);
const signed = z.looseObject({
	keyId: text,
	signature: text,
	statement: z.looseObject({
		format: z.literal('halfdigit-entry-1'),
		kind: text,
		index: z.int(),
		document: z.object({ team: text, note: text, number: text }),
		revision: text,
		contentHash: hash,
		signer: z.object({ id: text, name: text, role: text }),
		meaning: text,
		time: z.iso.datetime(),
		reason: text.nullable(),
	}),
});

/** As much of a sealed revision's file as its verification reads. */
const sealedRevision = z.strictObject({
	format: z.literal('halfdigit-sealed-revision-1'),
	revision: z.looseObject({
		format: z.literal('halfdigit-revision-2'),
		note: z.object({ id: text, number: text }),
		letter: text,
		candidate: hash,
		proposal: z.looseObject({}),
		signatures: z.array(signed),
		frozenAt: z.iso.datetime(),
	}),
	seal: signed,
});

export type SealedRevision = z.output<typeof sealedRevision>;
/** Public keys (SPKI, base64) by their id. */
export type KnownKeys = ReadonlyMap<string, string>;

/** A sealed revision with all that does not fit together in it. */
export interface Checked {
	revision: SealedRevision | undefined;
	digest: string;
	faults: string[];
	/** Whether it is sealed with a key that is not known here. */
	foreign: boolean;
}

/** Checks a sealed revision by itself and the public keys: digests, signatures, and what each is bound to. */
export function check(value: unknown, known: KnownKeys): Checked {
	const parsed = sealedRevision.safeParse(value);
	if (!parsed.success) {
		const faults = ['It is no sealed revision of Halfdigit.'];
		return { revision: undefined, digest: '', faults, foreign: false };
	}
	const { revision, seal: own } = parsed.data;
	const { digest } = seal(revision);
	const faults: string[] = [];
	if (own.statement.contentHash !== digest) faults.push('Its content is not what was sealed.');
	if (own.statement.kind !== 'freeze') faults.push('Its seal is a signature for something else.');
	if (seal(revision.proposal).digest !== revision.candidate) {
		faults.push('Its content is not the candidate that was signed.');
	}
	const all = [own, ...revision.signatures];
	for (const one of all) faults.push(...misfits(one, parsed.data, one === own, known));
	const meanings = revision.signatures.map(({ statement }) => statement.meaning);
	for (const meaning of ['prepared', 'checked', 'approved']) {
		if (!meanings.includes(meaning)) faults.push(`It has no signature “${meaning}”.`);
	}
	return {
		revision: parsed.data,
		digest,
		faults,
		foreign: all.some((one) => !known.has(one.keyId)),
	};
}

/** Who signed, as the signatures say. */
export function signersOf({ revision }: SealedRevision): SignOff[] {
	return revision.signatures.map(({ statement: { meaning, signer, time, reason } }) => ({
		meaning: meaning as SignOff['meaning'],
		name: signer.name,
		personId: signer.id,
		at: time,
		reason,
	}));
}

/** Whether a signed statement carries the signature of the key that it names. */
export function isGenuine(
	{
		statement,
		keyId,
		signature,
	}: Pick<SignedStatement, 'keyId' | 'signature'> & {
		statement: object;
	},
	known: KnownKeys,
): boolean {
	const key = known.get(keyId);
	return (
		key !== undefined && keys.isSignedBy(key, entryBytes(seal(statement).canonical), signature)
	);
}

function misfits(
	one: SealedRevision['seal'],
	{ revision }: SealedRevision,
	isSeal: boolean,
	known: KnownKeys,
): string[] {
	const { statement, keyId } = one;
	const what = isSeal
		? 'The seal'
		: `The signature “${statement.meaning}” of ${statement.signer.name}`;
	const faults: string[] = [];
	if (!known.has(keyId)) faults.push(`${what} is made with another key (${keyId}).`);
	else if (!isGenuine(one, known)) faults.push(`${what} is not genuine.`);
	const { note, number } = statement.document;
	if (note !== revision.note.id || number !== revision.note.number) {
		faults.push(`${what} belongs to another document (${number}).`);
	} else if (statement.revision !== revision.letter) {
		faults.push(`${what} belongs to another revision (${statement.revision}).`);
	}
	if (!isSeal && statement.contentHash !== revision.candidate) {
		faults.push(`${what} was given for another candidate.`);
	}
	return faults;
}
