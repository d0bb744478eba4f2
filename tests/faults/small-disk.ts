import { spawnSync } from 'node:child_process';
import { chownSync, mkdirSync, rmSync, statfsSync, writeFileSync } from 'node:fs';
import { databaseUser } from '../../server/local/postgres-programs.mjs';
import type { Cluster } from './cluster';

/** Room beside the edits that are there already. */
const megabytesFree = 24;

/** A file system in memory with a bound, on which PostgreSQL keeps the edits. */
export class SmallDisk {
	readonly #cluster: Cluster;
	readonly #folder: string;

	private constructor(cluster: Cluster, folder: string) {
		this.#cluster = cluster;
		this.#folder = folder;
	}

	/** Mounts one; where this machine does not allow that, the reason. */
	static async mount(cluster: Cluster): Promise<SmallDisk | string> {
		const [edits] = await cluster.ask<{ bytes: string }>(
			`select pg_total_relation_size('note_update')::text as bytes`,
		);
		const megabytes = megabytesFree + Math.ceil(Number(edits?.bytes) / 2 ** 20);
		const folder = `${cluster.folder}-disk`;
		mkdirSync(folder, { recursive: true });
		const words = ['-t', 'tmpfs', '-o', `size=${megabytes}m`, 'tmpfs', folder];
		const mounted = spawnSync('mount', words, { encoding: 'utf8' });
		if (mounted.status !== 0) {
			rmSync(folder, { recursive: true });
			return `no small disk could be mounted: ${mounted.stderr.trim()}`;
		}
		const user = databaseUser();
		const disk = new SmallDisk(cluster, folder);
		mkdirSync(disk.#place);
		if (user) chownSync(disk.#place, user.uid, user.gid);
		return disk;
	}

	/** Moves the table of the edits and its indexes there. */
	async holdEdits(): Promise<void> {
		await this.#cluster.ask(`create tablespace small location '${this.#place}'`);
		await this.#move('small');
	}

	/** Leaves no byte free. */
	fill(): void {
		const { bavail, bsize } = statfsSync(this.#folder);
		writeFileSync(this.#filler, Buffer.alloc(bavail * bsize, 1));
	}

	empty(): void {
		rmSync(this.#filler, { force: true });
	}

	/** Moves the edits back and takes the disk away. */
	async remove(): Promise<void> {
		await this.#move('pg_default');
		await this.#cluster.ask('checkpoint');
		await this.#cluster.ask('drop tablespace small');
		unmount(this.#folder);
	}

	get #place(): string {
		return `${this.#folder}/tablespace`;
	}

	get #filler(): string {
		return `${this.#folder}/filler`;
	}

	async #move(tablespace: string): Promise<void> {
		const indexes = await this.#cluster.ask<{ name: string }>(
			`select indexname as name from pg_indexes where tablename = 'note_update' and schemaname = 'public'`,
		);
		await this.#cluster.ask(
			[
				'begin',
				`alter table note_update set tablespace ${tablespace}`,
				...indexes.map(({ name }) => `alter index ${name} set tablespace ${tablespace}`),
				'commit',
			].join('; '),
		);
	}
}

/** Takes a small disk away, also where a process still holds a file of it open. */
export function unmount(folder: string): void {
	spawnSync('umount', ['--lazy', folder]);
	rmSync(folder, { recursive: true, force: true });
}
