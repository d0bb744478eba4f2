import { createHash } from 'node:crypto';
import { sql } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { fault, type Fault } from './fault';

const batch = 20_000;

/** The audit trail as it was read: the hash after each position, and what does not verify. */
export interface ReadTrail {
	count: number;
	/** Hash at each of the positions asked for. */
	at: Map<number, string>;
	faults: Fault[];
}

/** Recomputes the chain of the audit trail from its events. */
export async function checkAudit(
	connection: Connection,
	positions: readonly number[],
): Promise<ReadTrail> {
	const wanted = new Set(positions);
	const read: ReadTrail = { count: 0, at: new Map(), faults: [] };
	let hash = '';
	for (let last = 0; ;) {
		const { rows } = await connection.execute<{
			position: string;
			hash: string;
			text: string | null;
		}>(sql`
			select l."position"::text as position, l.hash,
				case when e.id is not null then audit_text(e) end as text
			from (select * from audit_link where "position" > ${last} order by "position" limit ${batch}) l
			left join audit_event e on e.id = l.event_id order by l."position"`);
		for (const row of rows) {
			const position = Number(row.position);
			const place = `audit entry ${position}`;
			if (position !== last + 1)
				read.faults.push(fault('deleted', place, 'Entries before it are missing.'));
			if (row.text === null) read.faults.push(fault('deleted', place, 'It is missing.'));
			const expected = createHash('sha256')
				.update(hash + (row.text ?? ''), 'utf8')
				.digest('hex');
			if (expected !== row.hash && row.text !== null) {
				read.faults.push(fault('edited', place, 'It is not what was written down.'));
			}
			// Goes on from what is stored, so that one edit is one fault.
			hash = row.hash;
			last = position;
			read.count += 1;
			if (wanted.has(position)) read.at.set(position, hash);
		}
		if (rows.length < batch) break;
	}
	const { rows } = await connection.execute<{ id: string }>(sql`
		select e.id::text as id from audit_event e left join audit_link l on l.event_id = e.id
		where l.event_id is null limit 20`);
	for (const { id } of rows) {
		read.faults.push(fault('rewritten', `audit event ${id}`, 'It is not in the chain.'));
	}
	return read;
}
