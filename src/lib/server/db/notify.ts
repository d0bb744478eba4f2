import { sql } from 'drizzle-orm';
import pg from 'pg';
import { z } from 'zod';
import type { News } from '$lib/protocol/messages';
import { presence } from '$lib/protocol/presence';
import { env } from '../env';
import { log } from '../log';
import { db } from './client';

const channel = 'halfdigit';

/** News for the pages of a note. */
const newsHint = z.object({ noteId: z.string(), about: z.enum(['comments', 'review']) });

const count = z.int().min(0);
const personEntry = z.tuple([count, count, presence.nullable()]);

/** What one process tells the others of the notes that are open in it, by note. A bare one says that it runs. */
const processHint = z.object({
	/** The process. */
	from: z.string().max(100),
	/** Newer sequence numbers of logs. */
	seqs: z.record(z.string(), count).optional(),
	/** Who is there: client id, clock, and what is known of them or null where they are gone. */
	people: z.record(z.string(), z.array(personEntry)).optional(),
	/** Notes that were opened in it; the others say who is there. */
	asks: z.array(z.string()).optional(),
});
export type ProcessHint = z.infer<typeof processHint>;

/** A hint that something changed. What it tells of is in the database, or will be told again. */
export type Hint = z.infer<typeof newsHint> | ProcessHint;

/** PostgreSQL takes payloads shorter than 8,000 bytes. */
export const maxHintBytes = 7900;

/**
 * Tells every process that comments or the review of a note changed. Call it after the commit. It is a
 * hint and never throws: what it tells of is in the database already.
 */
export async function notify(noteId: string, about: News['about']): Promise<void> {
	await send({ noteId, about });
}

/** Tells the other processes of this one. A hint, like `notify`. */
export async function tell(hint: ProcessHint): Promise<void> {
	await send(hint);
}

async function send(hint: Hint): Promise<void> {
	try {
		await db().execute(sql`select pg_notify(${channel}, ${JSON.stringify(hint)})`);
	} catch (error) {
		log().warn({ err: error }, 'a hint could not be sent');
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

/** Whoever may use the database can send a hint: what is none counts for nothing. */
function parse(payload: string | undefined): Hint | undefined {
	try {
		return z.union([newsHint, processHint]).safeParse(JSON.parse(payload ?? '')).data;
	} catch {
		return undefined;
	}
}
