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

	/** Cuts everybody off and takes every place. Nobody may be trying to come in meanwhile. */
	static async takeAll(cluster: Cluster): Promise<Hog> {
		const hog = new Hog(await cluster.connect());
		const takesAll = async () => {
			await hog.#admin.query(
				`select pg_terminate_backend(pid) from pg_stat_activity
				where usename = 'halfdigit' and application_name <> 'hog'`,
			);
			await hog.#takeFree(cluster.url());
			return hog.#hasAll();
		};
		try {
			await until(takesAll, 60_000, 'not every connection could be taken');
			return hog;
		} catch (error) {
			await hog.release();
			throw error;
		}
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
			const client = new pg.Client({ connectionString, application_name: 'hog' });
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

/** PostgreSQL's code for "too many connections". */
const tooMany = '53300';
