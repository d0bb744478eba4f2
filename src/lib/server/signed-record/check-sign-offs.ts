import { asc, eq } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { candidate, signOff } from '../db/schema/review';
import type { ReadRecord } from './check-entries';
import { seal } from '../revisions/digest';
import { fault, type Fault } from './fault';
import type { PersonalStatement, Statement } from './statement';

interface Row {
	signOff: typeof signOff.$inferSelect;
	candidate: {
		noteId: string;
		ordinal: number;
		digest: string;
		details: (typeof candidate.$inferSelect)['details'];
	};
}

/** Compares each sign-off with its entry in the record, and each entry with its sign-off. */
export async function checkSignOffs(
	connection: Connection,
	{ statements }: ReadRecord,
): Promise<Fault[]> {
	const { noteId, ordinal, digest, details } = candidate;
	const rows: Row[] = await connection
		.select({ signOff, candidate: { noteId, ordinal, digest, details } })
		.from(signOff)
		.innerJoin(candidate, eq(candidate.id, signOff.candidateId))
		.orderBy(asc(signOff.at), asc(signOff.id));
	const used = new Map<number, number>();
	for (const { entry } of rows.map((row) => row.signOff)) {
		if (entry !== null) used.set(entry, (used.get(entry) ?? 0) + 1);
	}
	const faults = rows.flatMap((row) => checkRow(row, statements, used));
	for (const [index, statement] of statements) {
		if (statement.kind !== 'signature' || used.has(index)) continue;
		const place = `${statement.document.number} candidate for ${statement.revision}`;
		const who = `The signature “${statement.meaning}” of ${statement.signer.name}`;
		faults.push(fault('deleted', place, `${who} (entry ${index}) is missing.`));
	}
	return faults;
}

function checkRow(
	row: Row,
	statements: ReadRecord['statements'],
	used: ReadonlyMap<number, number>,
): Fault[] {
	const { entry, meaning, personName } = row.signOff;
	const { details, ordinal } = row.candidate;
	const place = `${details?.note.number ?? row.candidate.noteId} candidate ${ordinal}`;
	const who = `The signature “${meaning}” of ${personName}`;
	const statement = entry === null ? undefined : statements.get(entry);
	if (statement?.kind !== 'signature') {
		return [fault('deleted', place, `${who} has no entry in the record.`)];
	}
	const bound = boundElsewhere(row, statement);
	if (bound) {
		const kind = (used.get(entry ?? -1) ?? 0) > 1 ? 'copied' : bound;
		const belongs = `${statement.document.number}, revision ${statement.revision}`;
		return [fault(kind, place, `${who} was given elsewhere: for ${belongs}.`)];
	}
	if (seal(said(row.signOff)).canonical === seal(stated(statement)).canonical) return [];
	// Another signature on the same candidate that fits this row tells a swap from an edit.
	const swapped = [...statements.values()].some(
		(other) =>
			other !== statement &&
			other.kind === 'signature' &&
			other.contentHash === statement.contentHash &&
			seal(stated(other)).canonical === seal(said(row.signOff)).canonical,
	);
	return [
		fault(swapped ? 'swapped' : 'edited', place, `${who} is not what its entry ${entry} says.`),
	];
}

function boundElsewhere(row: Row, statement: PersonalStatement): 'other document' | 'moved' | null {
	if (statement.document.note !== row.candidate.noteId) return 'other document';
	if (statement.contentHash !== row.candidate.digest) return 'moved';
	return statement.contentHash === row.signOff.digest ? null : 'moved';
}

function said({ meaning, personId, personName, role, reason, at, details }: Row['signOff']) {
	const signer = { id: personId, name: personName, role };
	return { meaning, signer, reason, time: at.toISOString(), ...details };
}

function stated(statement: Statement & PersonalStatement) {
	const { meaning, signer, reason, time, waivers, cautions } = statement;
	return { meaning, signer, reason, time, waivers, cautions };
}
