import { join } from 'node:path';
import { inData } from '../../server/local/place.mjs';
import { childrenOf } from './processes';
import type { Site } from './site';
import { Stage } from './stage';
import { acknowledgedTooEarly, Trace } from './trace';
import { until } from './until';

/** What was seen of edits that were made one at a time. */
export interface Seen {
	edits: number;
	/** Acknowledged before their transaction was on disk. */
	early: string[];
	/** Why nothing closer could be seen; then the position of the flushed log is all the evidence. */
	reason: string | undefined;
}

/** Watches from outside whether the log is flushed to disk before an acknowledgement leaves the process. */
export async function watchFlushes(site: Site, isFull: boolean, seed: number): Promise<Seen> {
	const stage = await Stage.open(site, isFull, seed, { notes: 1, writers: 1 });
	const [writer] = stage.writers;
	const [note] = stage.notes;
	const [post] = site.posts;
	if (!writer || !note || !post?.server) throw new Error('there is nobody to watch');
	const { pid } = site.cluster;
	const file = join(inData(), `trace-${process.pid}`);
	const trace = await Trace.begin([post.server.pid, pid, ...childrenOf(pid)], file);
	const behind: string[] = [];
	try {
		const known = note.ledger.edits.size;
		for (let n = 0; n < (isFull ? 50 : 8); n++) {
			const [before] = await site.cluster.ask<{ at: string }>(
				'select pg_current_wal_insert_lsn() at',
			);
			const edit = writer.append(stage.random);
			await until(() => edit.acknowledged, 30_000, 'an edit was not acknowledged');
			const [after] = await site.cluster.ask<{ isFlushed: boolean }>(
				`select pg_current_wal_flush_lsn() > '${before?.at}'::pg_lsn as "isFlushed"`,
			);
			if (!after?.isFlushed) behind.push(edit.value);
		}
		const edits = [...note.ledger.edits].slice(known);
		if (typeof trace === 'string') return { edits: edits.length, early: behind, reason: trace };
		const early = [...behind, ...acknowledgedTooEarly(await trace.end(), edits)];
		return { edits: edits.length, early, reason: undefined };
	} finally {
		stage.destroy();
	}
}
