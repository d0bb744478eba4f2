import { performance } from 'node:perf_hooks';
import { desc, eq, sql } from 'drizzle-orm';
import pg from 'pg';
import { db } from '$lib/server/db/client';
import { candidate } from '$lib/server/db/schema/review';
import { env } from '$lib/server/env';
import { closePool } from '$lib/server/evaluation/pool';
import * as paper from '$lib/server/paper/paper';
import { closePress } from '$lib/server/paper/printing';
import * as candidates from '$lib/server/revisions/candidates';
import { freeze } from '$lib/server/revisions/freeze';
import { letterOf } from '$lib/server/revisions/letters';
import { download } from '$lib/server/revisions/sealed-file';
import { sign } from '$lib/server/revisions/sign';
import { digestOf } from '$lib/server/revisions/snapshot';
import * as standings from '$lib/server/revisions/standing';
import * as checkpoints from '$lib/server/signed-record/checkpoints';
import * as dropped from '$lib/server/signed-record/dropped';
import { checkAudit } from '$lib/server/signed-record/check-audit';
import { verifyAll } from '$lib/server/signed-record/verification';
import { createDatabase } from '../support/database';
import { check, freeze as freezeWhole, propose, seen, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';
import { last200, lines200 } from './note-200';
import { row, type Row } from './row';
import { sixtyLines } from './sixty-lines';

const notesCount = 20;
const revisionsEach = 50;
const auditEntries = 100_000;

/** Freezing, and verification of 1 000 revisions of notes of 60 lines and of 100 000 audit entries. */
export async function signingRows(): Promise<Row[]> {
	const database = await createDatabase();
	Object.assign(env(), { DATABASE_URL: database.url, CHECKPOINT_FOLDER: '' });
	const owner = new pg.Client({ connectionString: database.ownerUrl });
	await owner.connect();
	try {
		const cast = await makeCast();
		let number = '';
		let freezing = 0;
		for (let note = 0; note < notesCount; note++) {
			const made = await writeNote(cast.author, `Note ${note}`, sixtyLines);
			number = made.number;
			await propose(cast.author, number);
			await check(cast, number);
			const open = await seen(cast.approver, number);
			const from = performance.now();
			await candidates.approve(cast.approver, number, open);
			freezing = Math.max(freezing, performance.now() - from);
			await repeat(cast, made.id, number);
		}
		const note = await db().transaction(checkpoints.make);
		const verifying = await timed(async () => {
			const report = await verifyAll({ trustedKeys: [], checkpoints: note ? [note] : [] });
			if (report.faults.length > 0 || report.revisions !== notesCount * revisionsEach) {
				throw new Error(`${report.revisions} revisions, ${JSON.stringify(report.faults[0])}`);
			}
		});
		const file = Buffer.from(await download(cast.reader, number, letterOf(revisionsEach)));
		const one = await timed(async () => {
			if ((await dropped.file(file)).state !== 'valid') throw new Error('the file is not valid');
		});
		const printing = await papers(cast);
		const freezingLong = await freezingOf(cast);
		await fillAudit(owner, cast);
		const auditing = await timed(async () => {
			const { faults } = await checkAudit(db(), []);
			if (faults.length > 0) throw new Error('the trail does not verify');
		});
		return [
			row({
				id: 'signing.verify-revisions',
				what: `verifying ${notesCount * revisionsEach} revisions of 60 lines and all that belongs to them`,
				value: verifying / 1000,
				unit: 's',
				target: 10,
			}),
			row({
				id: 'signing.verify-file',
				what: `verifying one file of ${Math.round(file.length / 1000)} kB against the database`,
				value: one,
				unit: 'ms',
				target: 100,
			}),
			row({
				id: 'signing.audit',
				what: `reading and checking ${auditEntries} audit entries`,
				value: auditing / 1000,
				unit: 's',
				target: 2,
			}),
			row({
				id: 'signing.pdf',
				what: 'PDF of a frozen note of 200 lines, set anew, the slowest of three',
				value: printing,
				unit: 'ms',
				target: 1000,
			}),
			row({
				id: 'signing.freeze-200',
				what: 'proposing (10⁶ trials), checking and freezing a note of 200 lines in doubt, with its passwords',
				value: freezingLong / 1000,
				unit: 's',
				target: 5,
			}),
			row({
				id: 'signing.freeze',
				what: 'approving and freezing a note of 60 lines, the slowest of 20',
				value: freezing,
				unit: 'ms',
				target: 5000,
			}),
		];
	} finally {
		closePress();
		await closePool();
		await owner.end();
		await database.drop();
	}
}

/** Time that the three deeds take which bring a note of 200 lines from its working copy to a frozen revision. */
async function freezingOf(cast: Cast): Promise<number> {
	const { number } = await writeNote(cast.author, 'Two hundred lines', [
		{ kind: 'calculation', source: lines200(true).join('\n') },
		{ kind: 'requirement', source: `${last200} < 100 V` },
	]);
	return timed(async () => {
		await propose(cast.author, number);
		await check(cast, number);
		await candidates.approve(cast.approver, number, await seen(cast.approver, number));
	});
}

/** Time of the slowest of three papers of different notes; the typesetter runs already, as on a server in use. */
async function papers(cast: Cast): Promise<number> {
	const source = (from: number) =>
		lines200(true)
			.slice(from, from + 20)
			.join('\n');
	let slowest = 0;
	for (const name of ['Warm-up', 'First', 'Second', 'Third']) {
		const cells = Array.from({ length: 10 }, (_, i) => ({
			kind: 'calculation' as const,
			source: `# ${name}\n${source(20 * i)}`,
		}));
		const { number } = await writeNote(cast.author, `${name} ladder`, cells);
		await freezeWhole(cast, number);
		const took = await timed(async () => {
			await paper.ofRevision(cast.reader, number, 'A', 'a4');
		});
		if (name !== 'Warm-up') slowest = Math.max(slowest, took);
	}
	return slowest;
}

/** Freezes the newest candidate again and again, without its passwords. */
async function repeat({ author, engineer, approver }: Cast, noteId: string, number: string) {
	for (let round = 1; round < revisionsEach; round++) {
		await db().transaction(async (tx) => {
			const [last] = await tx
				.select()
				.from(candidate)
				.where(eq(candidate.noteId, noteId))
				.orderBy(desc(candidate.ordinal))
				.limit(1);
			if (!last?.details) throw new Error('there is no candidate');
			const { seq, content, results, engine, authors } = last;
			const ordinal = last.ordinal + 1;
			const details = { ...last.details, letter: letterOf(ordinal), changes: `Round ${round}` };
			const next = { noteId, seq, content, results, engine, authors, ordinal, details };
			const [made] = await tx
				.insert(candidate)
				.values({ ...next, digest: digestOf(next) })
				.returning();
			if (!made) throw new Error('the candidate was not stored');
			await sign(tx, author, made, 'prepared');
			await sign(tx, engineer, made, 'checked');
			const standing = await standings.read(tx, noteId);
			await freeze(tx, approver, number, standing, made, {});
		});
	}
}

async function fillAudit(owner: pg.Client, { author }: Cast): Promise<void> {
	const { rows } = await db().execute<{ count: number }>(
		sql`select count(*)::int as count from audit_event`,
	);
	await owner.query('alter table audit_event disable trigger chained');
	await owner.query(`insert into audit_event (team_id, person_id, action, subject, after)
		select '${author.teamId}', '${author.personId}', 'comment added', 'note:' || gen_random_uuid(),
			jsonb_build_object('thread', gen_random_uuid(), 'body', 'A comment of usual length.')
		from generate_series(1, ${auditEntries - (rows[0]?.count ?? 0)})`);
	await owner.query(`do $$ declare e audit_event; h text; p bigint; begin
		select "position", hash into p, h from audit_link order by "position" desc limit 1;
		for e in select * from audit_event where id > (select max(event_id) from audit_link) order by id loop
			p := p + 1;
			h := encode(sha256(convert_to(h || audit_text(e), 'UTF8')), 'hex');
			insert into audit_link values (p, e.id, h);
		end loop;
	end $$`);
	await owner.query('vacuum analyze audit_event, audit_link');
}

async function timed(work: () => Promise<void>): Promise<number> {
	const from = performance.now();
	await work();
	return performance.now() - from;
}
