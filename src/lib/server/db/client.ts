import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { env } from '../env';
import { log } from '../log';
import * as listing from './schema/listing';
import * as notes from './schema/notes';
import * as people from './schema/people';
import * as record from './schema/record';
import * as review from './schema/review';
import * as tokens from './schema/tokens';

export const schema = { ...people, ...tokens, ...notes, ...review, ...record, ...listing };

export type Database = NodePgDatabase<typeof schema>;
/** What a function needs that may run inside a caller's transaction. */
export type Connection = Pick<Database, 'select' | 'insert' | 'update' | 'delete' | 'execute'>;

let pool: pg.Pool | undefined;
let database: Database | undefined;

/** The process's database, connected at the first query. */
export function db(): Database {
	if (database) return database;
	pool = new pg.Pool({
		connectionString: env().DATABASE_URL,
		max: 10,
		connectionTimeoutMillis: 5000,
	});
	pool.on('error', (error) => log().warn({ err: error }, 'idle database connection lost'));
	// A connection lost between two statements of a transaction: the next statement fails, the process does not.
	pool.on('connect', (client) => client.on('error', () => undefined));
	database = drizzle(pool, { schema });
	database.transaction = onOneConnection(pool);
	return database;
}

/**
 * Transactions that give their connection back whatever happens. Drizzle's own keep it for good where already `begin` fails,
 * as while the database is killed, until none is left.
 */
function onOneConnection(pool: pg.Pool): Database['transaction'] {
	const sessions = new WeakMap<pg.PoolClient, Database>();
	return async (work, config) => {
		const client = await pool.connect();
		try {
			const session = sessions.get(client) ?? drizzle(client, { schema });
			sessions.set(client, session);
			return await session.transaction(work, config);
		} finally {
			// The pool drops one that was lost.
			client.release();
		}
	};
}

/** Ends the pool; the next `db()` opens a new one. */
export async function closeDb(): Promise<void> {
	const ending = pool;
	pool = database = undefined;
	await ending?.end();
}
