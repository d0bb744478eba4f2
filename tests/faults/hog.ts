import pg from 'pg';
import type { Cluster } from './cluster';
import { until } from './until';

/** Takes all connections that PostgreSQL gives to anybody but the superuser. */
export class Hog {
	readonly #clients: pg.Client[] = [];

	/** Takes what is free, cuts the others off and takes theirs, until nobody else has one. */
	static async takeAll(cluster: Cluster): Promise<Hog> {
		const hog = new Hog();
		const admin = await cluster.connect();
		try {
			// Somebody who is about to come in has a place already, although he is not to be seen yet.
			const { rows } = await admin.query<{ places: number }>(
				`select current_setting('max_connections')::int
				- current_setting('superuser_reserved_connections')::int as places`,
			);
			await until(async () => {
				await hog.#takeFree(cluster);
				const { rowCount } = await admin.query(
					`select from pg_stat_activity where application_name = 'hog'`,
				);
				if (rowCount === rows[0]?.places) return true;
				await admin.query(
					`select pg_terminate_backend(pid) from pg_stat_activity
					where usename = 'halfdigit' and application_name <> 'hog'`,
				);
				return false;
			}, 30_000);
		} finally {
			await admin.end();
		}
		return hog;
	}

	async release(): Promise<void> {
		await Promise.all(this.#clients.splice(0).map((client) => client.end()));
	}

	async #takeFree(cluster: Cluster): Promise<void> {
		for (let isFree = true; isFree;) {
			const tries = await Promise.all(Array.from({ length: 20 }, () => this.#take(cluster)));
			isFree = tries.every(Boolean);
		}
	}

	async #take(cluster: Cluster): Promise<boolean> {
		const client = new pg.Client({ connectionString: cluster.url(), application_name: 'hog' });
		client.on('error', () => undefined);
		try {
			await client.connect();
			this.#clients.push(client);
			return true;
		} catch {
			return false;
		}
	}
}
