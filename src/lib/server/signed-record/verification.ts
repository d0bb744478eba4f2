import { db, type Connection } from '../db/client';
import { checkAudit } from './check-audit';
import { checkEntries, type ReadRecord } from './check-entries';
import { checkRevisions } from './check-revisions';
import { checkSignOffs } from './check-sign-offs';
import * as checkpoints from './checkpoints';
import { fault, type Fault } from './fault';
import { treeRoot } from './merkle';

/** What is known from elsewhere than the database. */
export interface Anchors {
	/** Ids of keys that must be among the installation's. */
	trustedKeys: readonly string[];
	/** Checkpoints that were kept outside, oldest first. */
	checkpoints: readonly string[];
}

export interface Report {
	entries: number;
	revisions: number;
	candidates: number;
	auditEntries: number;
	checkpoints: number;
	faults: Fault[];
}

/**
 * Verifies everything that is signed, frozen or witnessed, over the whole database, in one moment of it: the record's
 * entries, sign-offs and revisions against them, the audit trail, and all of it against what was kept outside.
 */
export function verifyAll(anchors: Anchors): Promise<Report> {
	return db().transaction((tx) => verifyWithin(tx, anchors), {
		isolationLevel: 'repeatable read',
		accessMode: 'read only',
	});
}

/** The same within a transaction. */
export async function verifyWithin(tx: Connection, anchors: Anchors): Promise<Report> {
	const record = await checkEntries(tx, anchors.trustedKeys);
	const frozen = await checkRevisions(tx, record);
	const signOffs = await checkSignOffs(tx, record);
	const kept = anchors.checkpoints.flatMap((note) => readCheckpoint(note));
	const positions = kept.map(({ said }) => said.audit.position);
	const trail = await checkAudit(tx, positions);
	return {
		entries: record.hashes.length,
		revisions: frozen.revisions,
		candidates: frozen.candidates,
		auditEntries: trail.count,
		checkpoints: kept.length,
		faults: [
			...record.faults,
			...againstCheckpoints(record, kept),
			...frozen.faults,
			...signOffs,
			...trail.faults,
			...kept.flatMap(({ said }) => trailAgainst(said, trail.count, trail.at)),
		],
	};
}

interface Kept {
	note: string;
	said: checkpoints.Checkpoint;
}

function readCheckpoint(note: string): Kept[] {
	try {
		return [{ note, said: checkpoints.parse(note) }];
	} catch {
		return [];
	}
}

function againstCheckpoints({ hashes, keys }: ReadRecord, kept: readonly Kept[]): Fault[] {
	const size = hashes.length;
	const longest = Math.max(0, ...kept.map(({ said }) => said.size));
	if (size === 0 && longest > 0) {
		const sentence = `A checkpoint says that it had ${longest} entries; it has none.`;
		return [fault('deleted all', 'the record', sentence)];
	}
	const faults: Fault[] = [];
	if (longest > size) {
		const sentence = `A checkpoint says that it had ${longest} entries; ${size} are left.`;
		faults.push(fault('truncated', 'the record', sentence));
	}
	for (const { note, said } of kept) {
		const signed = [...keys.values()].some((key) => checkpoints.isSigned(note, key));
		const same = said.size > size || treeRoot(hashes.slice(0, said.size)) === said.root;
		if (signed && same) continue;
		const place = `the first ${said.size} entries`;
		const sentence = signed
			? 'They are not those that the checkpoint was made over.'
			: 'Their checkpoint is signed with a key that the record does not know.';
		faults.push(fault('rewritten', place, sentence));
	}
	return faults;
}

function trailAgainst(
	{ audit: { position, hash } }: checkpoints.Checkpoint,
	count: number,
	at: ReadonlyMap<number, string>,
): Fault[] {
	if (position === 0) return [];
	if (position > count) {
		const sentence = `A checkpoint says that it had ${position} entries; ${count} are left.`;
		return [fault('truncated', 'the audit trail', sentence)];
	}
	if (at.get(position) === hash) return [];
	const sentence = 'They are not those that the checkpoint was made over.';
	return [fault('rewritten', `the first ${position} audit entries`, sentence)];
}
