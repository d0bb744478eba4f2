import { sql } from 'drizzle-orm';
import pg from 'pg';
import type { News } from '$lib/protocol/messages';
import { env } from '../env';
import { log } from '../log';
import { db } from './client';

const channel = 'halfdigit';

/** A hint that something changed: news for the pages of a note, or a newer sequence number of its log. */
export type Hint = { noteId: string } & ({ about: News['about'] } | { seq: number });

/**
 * Tells every process that comments or the review of a note changed. Call it after the commit. It is a
 * hint and never throws: what it tells of is in the database already.
 */
export async function notify(noteId: string, about: News['about']): Promise<void> {
	await send({ noteId, about });
}

/** Tells every process that a note's log has grown to a sequence number. A hint, like `notify`. */
export async function announce(noteId: string, seq: number): Promise<void> {
	await send({ noteId, seq });
}

async function send(hint: Hint): Promise<void> {
	try {
		await db().execute(sql`select pg_notify(${channel}, ${JSON.stringify(hint)})`);
	} catch (error) {
		log().warn({ err: error, noteId: hint.noteId }, 'a hint could not be sent');
	}
}

export interface Listener {
	close(): Promise<void>;
}

/**
 * Hears hints on a connection of its own, which is made again whenever it breaks. `onGap` is called each
 * time it stands: what was said before was not heard.
 */
export function listen(onHint: (hint: Hint) => void, onGap: () => void): Listener {
	let closed = false;
	let client: pg.Client | undefined;
	let retry: NodeJS.Timeout | undefined;
	let delayMs = 100;

	const again = (lost: pg.Client) => {
		if (closed || client !== lost) return;
		client = undefined;
		lost.end().catch(() => undefined);
		retry = setTimeout(() => void connect(), delayMs);
		delayMs = Math.min(delayMs * 2, 2000);
	};

	const connect = async () => {
		const mine = (client = new pg.Client({
			connectionString: env().DATABASE_URL,
			connectionTimeoutMillis: 5000,
			keepAlive: true,
		}));
		mine.on('error', (error) => {
			log().warn({ err: error }, 'the listening database connection was lost');
			again(mine);
		});
		mine.on('end', () => again(mine));
		mine.on('notification', ({ payload }) => {
			const hint = parse(payload);
			if (hint) onHint(hint);
		});
		try {
			await mine.connect();
			await mine.query(`listen ${channel}`);
			delayMs = 100;
			onGap();
		} catch (error) {
			log().warn({ err: error }, 'the database cannot be listened to');
			again(mine);
		}
	};

	void connect();
	return {
		close: async () => {
			closed = true;
			clearTimeout(retry);
			await client?.end().catch(() => undefined);
		},
	};
}

function parse(payload: string | undefined): Hint | undefined {
	try {
		return JSON.parse(payload ?? '') as Hint;
	} catch {
		return undefined;
	}
}
