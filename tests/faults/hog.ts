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
			// Somebody who was about to come in may be there a moment later.
			let quiet = 0;
			await until(async () => {
				await hog.#takeFree(cluster);
				const { rowCount } = await admin.query(
					`select pg_terminate_backend(pid) from pg_stat_activity
					where usename = 'halfdigit' and application_name <> 'hog'`,
				);
				quiet = rowCount === 0 ? quiet + 1 : 0;
				return quiet >= 5;
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
