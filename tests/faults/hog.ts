import { randomBytes } from 'node:crypto';
import pg from 'pg';
import type { Cluster } from './cluster';
import { until } from './until';

/** Takes all connections that PostgreSQL gives to anybody but the superuser. */
export class Hog {
	readonly #clients: pg.Client[] = [];
	/** Holds a place too, so it stays. */
	readonly #admin: pg.Client;

	private constructor(admin: pg.Client) {
		this.#admin = admin;
	}

	/** Cuts everybody off, takes every place before they are back, and only then lets them try again. */
	static async takeAll(cluster: Cluster): Promise<Hog> {
		const hog = new Hog(await cluster.connect());
		const password = randomBytes(12).toString('hex');
		const ask = (question: string) => hog.#admin.query(question);
		await ask('drop role if exists hog');
		await ask(`create role hog login password '${password}'`);
		await ask('alter role halfdigit connection limit 0');
		try {
			const url = new URL(cluster.url());
			Object.assign(url, { username: 'hog', password });
			// Whoever knocks holds a place until he is sent away, so that one refusal does not mean that all are taken.
			const takesAll = async () => {
				await ask(
					`select pg_terminate_backend(pid) from pg_stat_activity where usename = 'halfdigit'`,
				);
				await hog.#takeFree(url.href);
				return hog.#hasAll();
			};
			await until(takesAll, 60_000, 'not every connection could be taken');
		} catch (error) {
			await ask(unlimited);
			await hog.release();
			throw error;
		}
		await ask(unlimited);
		return hog;
	}

	async release(): Promise<void> {
		await Promise.all([...this.#clients.splice(0), this.#admin].map((client) => client.end()));
	}

	async #hasAll(): Promise<boolean> {
		const { rows } = await this.#admin.query<{ places: number }>(
			`select current_setting('max_connections')::int
				- current_setting('superuser_reserved_connections')::int as places`,
		);
		return this.#clients.length + 1 === rows[0]?.places;
	}

	/** Takes places until PostgreSQL says that there is none left. */
	async #takeFree(connectionString: string): Promise<void> {
		for (;;) {
			const client = new pg.Client({ connectionString });
			client.on('error', () => undefined);
			try {
				await client.connect();
				this.#clients.push(client);
			} catch (error) {
				if (error instanceof pg.DatabaseError && error.code === tooMany) return;
				throw error;
			}
		}
	}
}

const unlimited = 'alter role halfdigit connection limit -1';

/** PostgreSQL's code for "too many connections". */
const tooMany = '53300';
