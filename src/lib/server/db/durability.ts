import { AppError } from '$lib/errors';
import { sql } from 'drizzle-orm';
import { log } from '../log';
import { db } from './client';
import { isOutage } from './outage';

/** Names of the settings that are off although a commit is not safe without them; empty where all is well. */
export const weakness = sql<string>`concat_ws(', ',
	case when current_setting('fsync') = 'off' then 'fsync' end,
	case when current_setting('full_page_writes') = 'off' then 'full_page_writes' end,
	case when current_setting('synchronous_commit') = 'off' then 'synchronous_commit' end)`;

/** Throws AppError `unavailable` where a commit would not survive a crash of the database. */
export function refuseWeak(weak: string): void {
	if (weak === '') return;
	throw new AppError(
		'unavailable',
		`The database runs with ${weak} off. What it calls stored could be lost in a crash, so Halfdigit takes no edits. Turn the setting on again.`,
	);
}

/** Throws where the database would lose what it calls stored. One that cannot be reached is asked again with each edit. */
export async function demandDurable(): Promise<void> {
	try {
		const { rows } = await db().execute<{ weak: string }>(sql`select ${weakness} as weak`);
		refuseWeak(rows[0]?.weak ?? '');
	} catch (error) {
		if (!isOutage(error)) throw error;
		log().warn({ err: error }, 'the database cannot be asked how it stores');
	}
}
