import { createHash } from 'node:crypto';
import { asc, eq, gt, inArray } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { candidate, revision, withdrawal } from '../db/schema/review';
import { seal } from '../revisions/digest';
import { letterOf } from '../revisions/letters';
import { snapshotOf } from '../revisions/snapshot';
import type { ReadRecord } from './check-entries';
import { fault, type Fault } from './fault';
import { check } from './sealed';
import * as entries from './entries';
import type { PersonalStatement, Statement } from './statement';

const batch = 50;

type Row = {
	revision: typeof revision.$inferSelect;
	candidate: typeof candidate.$inferSelect;
};

/** What was found of revisions and candidates. */
export interface CheckedRevisions {
	revisions: number;
	candidates: number;
	faults: Fault[];
}

/** Checks each frozen revision against its seal, its candidate and the revision before it. */
export async function checkRevisions(
	connection: Connection,
	record: ReadRecord,
): Promise<CheckedRevisions> {
	const faults: Fault[] = [];
	const sealed = new Set<number>();
	const chains = new Map<string, { count: number; digest: string | null }>();
	let revisions = 0;
	let candidates = 0;
	for (let after = ''; ;) {
		const snapshots = await connection
			.select()
			.from(candidate)
			.where(after === '' ? undefined : gt(candidate.id, after))
			.orderBy(asc(candidate.id))
			.limit(batch);
		for (const row of snapshots) faults.push(...checkCandidate(row));
		candidates += snapshots.length;
		after = snapshots.at(-1)?.id ?? '';
		if (snapshots.length < batch) break;
	}
	const order = await connection
		.select({ id: revision.id })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.orderBy(asc(revision.noteId), asc(candidate.ordinal));
	for (let from = 0; from < order.length; from += batch) {
		const ids = order.slice(from, from + batch).map(({ id }) => id);
		const rows = await connection
			.select({ revision, candidate })
			.from(revision)
			.innerJoin(candidate, eq(candidate.id, revision.candidateId))
			.where(inArray(revision.id, ids))
			.orderBy(asc(revision.noteId), asc(candidate.ordinal));
		for (const row of rows) {
			revisions += 1;
			if (row.revision.entry !== null) sealed.add(row.revision.entry);
			faults.push(...(await checkRevision(connection, row, record, chains)));
		}
	}
	for (const [index, statement] of record.statements) {
		if (statement.kind !== 'freeze' || sealed.has(index)) continue;
		const place = `${statement.document.number} revision ${statement.revision}`;
		faults.push(fault('deleted', place, `It was frozen (entry ${index}) and is missing.`));
	}
	faults.push(...(await checkWithdrawals(connection, record)));
	return { revisions, candidates, faults };
}

function checkCandidate(row: typeof candidate.$inferSelect): Fault[] {
	if (row.details === null || seal(snapshotOf(row)).digest === row.digest) return [];
	const place = `${row.details.note.number} candidate ${row.ordinal}`;
	return [fault('edited', place, 'Its content is not what was signed.')];
}

async function checkRevision(
	connection: Connection,
	{ revision: row, candidate: snapshot }: Row,
	record: ReadRecord,
	chains: Map<string, { count: number; digest: string | null }>,
): Promise<Fault[]> {
	const number = snapshot.details?.note.number ?? row.noteId;
	const place = `${number} revision ${row.letter}`;
	const chain = chains.get(row.noteId) ?? { count: 0, digest: null };
	chains.set(row.noteId, { count: chain.count + 1, digest: row.digest });
	const faults: Fault[] = [];
	if (row.letter !== letterOf(chain.count + 1)) {
		faults.push(fault('deleted', place, `A revision before it is missing or out of order.`));
	}
	const statement = row.entry === null ? undefined : record.statements.get(row.entry);
	if (statement?.kind !== 'freeze') {
		return [...faults, fault('deleted', place, 'It has no entry in the record.')];
	}
	if (statement.document.note !== row.noteId) {
		const sentence = `Its seal is for ${statement.document.number}, revision ${statement.revision}.`;
		return [...faults, fault('other document', place, sentence)];
	}
	const digest = createHash('sha256').update(row.canonical, 'utf8').digest('hex');
	if (digest !== statement.contentHash || digest !== row.digest) {
		const other = [...record.statements.values()].find(
			(one) => one.kind === 'freeze' && one !== statement && one.contentHash === digest,
		);
		const sentence = 'Its content is not what was sealed.';
		return [...faults, fault(other ? 'swapped' : 'edited', place, sentence)];
	}
	const [own] = await entries.read(connection, [row.entry ?? -1]);
	const content = JSON.parse(row.canonical) as { previous: string | null; letter: string };
	const checked = check(
		{ format: 'halfdigit-sealed-revision-1', revision: content, seal: own },
		record.keys,
	);
	faults.push(...checked.faults.map((sentence) => fault('edited', place, sentence)));
	if (content.letter !== row.letter)
		faults.push(fault('moved', place, 'It was frozen under another letter.'));
	if (checked.revision?.revision.candidate !== snapshot.digest) {
		faults.push(fault('moved', place, 'It was frozen from another candidate.'));
	}
	if (chain.count > 0 && content.previous !== chain.digest) {
		faults.push(fault('rewritten', place, 'It names another revision before it than there is.'));
	}
	return faults;
}

async function checkWithdrawals(connection: Connection, { statements }: ReadRecord) {
	const rows = await connection
		.select({ withdrawal, digest: revision.digest, letter: revision.letter })
		.from(withdrawal)
		.innerJoin(revision, eq(revision.id, withdrawal.revisionId));
	const used = new Set<number>();
	const faults = rows.flatMap(({ withdrawal: row, digest, letter }): Fault[] => {
		used.add(row.entry);
		const statement = statements.get(row.entry);
		if (statement?.kind === 'withdrawal' && fits(statement, row, digest)) return [];
		const place = `withdrawal of revision ${letter}`;
		return [fault('edited', place, `It is not what entry ${row.entry} of the record says.`)];
	});
	for (const [index, statement] of statements) {
		if (statement.kind !== 'withdrawal' || used.has(index)) continue;
		const place = `${statement.document.number} revision ${statement.revision}`;
		faults.push(fault('deleted', place, `Its withdrawal (entry ${index}) is missing.`));
	}
	return faults;
}

function fits(
	statement: Statement & PersonalStatement,
	row: typeof withdrawal.$inferSelect,
	digest: string,
): boolean {
	return (
		statement.contentHash === digest &&
		row.digest === digest &&
		statement.signer.id === row.personId &&
		statement.signer.name === row.personName &&
		statement.reason === row.reason &&
		statement.time === row.at.toISOString()
	);
}
