import type { Waiver } from '$lib/schemas/review';
import { seal } from '../revisions/digest';
import { leafHash } from './merkle';

/** What a person puts their name to, and to what it is bound. */
export interface PersonalStatement {
	kind: 'signature' | 'freeze' | 'withdrawal';
	document: { team: string; note: string; number: string };
	/** Letter of the revision it is or would become. */
	revision: string;
	/** SHA-256 of the canonical JSON of the candidate or revision. */
	contentHash: string;
	signer: { id: string; name: string; role: string };
	meaning: 'prepared' | 'checked' | 'approved' | 'returned' | 'frozen' | 'withdrawn';
	/** How the signer was identified. */
	method: 'password';
	reason: string | null;
	waivers?: Waiver[];
	cautions?: string[];
}

/** A key of the installation comes into use; the key before it signs that, the first one itself. */
export interface KeyStatement {
	kind: 'key';
	key: { id: string; publicKey: string };
	/** The new key's own signature over `newKeyBytes`, base64. */
	proof: string;
}

/** A statement at its place in the record. */
export type Statement = (PersonalStatement | KeyStatement) & {
	format: 'halfdigit-entry-1';
	index: number;
	/** ISO 8601, UTC. */
	time: string;
	timeSource: string;
	/** Hash of the entry before it; null for the first. */
	previous: string | null;
};

/** A statement with the signature of a key. */
export interface SignedStatement {
	statement: Statement;
	keyId: string;
	signature: string;
}

/** Where the time of a signature comes from. */
export const timeSource = 'clock of the database server';

const entryDomain = 'halfdigit signed entry 1\n';
const keyDomain = 'halfdigit new key 1\n';

/** What is signed for an entry: nothing else that the key signs begins so. */
export function entryBytes(statement: string): Buffer {
	return Buffer.from(entryDomain + statement, 'utf8');
}

/** What a new key signs itself. */
export function newKeyBytes(key: KeyStatement['key']): Buffer {
	return Buffer.from(keyDomain + seal(key).canonical, 'utf8');
}

/** Hash of an entry, from its statement's canonical JSON. */
export function entryHash(statement: string, keyId: string, signature: string): string {
	return leafHash(
		`{"keyId":${JSON.stringify(keyId)},"signature":${JSON.stringify(signature)},"statement":${statement}}`,
	);
}
