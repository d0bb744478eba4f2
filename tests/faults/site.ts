import type { Actor } from '$lib/server/auth/access';
import { closeDb } from '$lib/server/db/client';
import { closePool } from '$lib/server/evaluation/pool';
import { applyMigrations } from '../../server/local/migrations';
import { firstFree } from '../../server/local/ports.mjs';
import { isAlive } from '../../server/local/processes.mjs';
import { makeMember, makeTeam, signIn } from '../support/people';
import { freePort, startSyncServer, syncUrl, type SyncServer } from '../support/server';
import { Cluster } from './cluster';
import { nameInList, sweepServers } from './processes';
import { Wire } from './wire';

const firstPort = 54529;

/** One sync process with the wires on both of its sides: pages come in by `front`, it asks the database by `back`. */
export interface Post {
	front: Wire;
	back: Wire;
	/** Where it listens, also after it was killed and started again. */
	port: number;
	server: SyncServer | undefined;
}

/** A database of its own, sync processes on it, and people who may write. */
export class Site {
	readonly cluster: Cluster;
	readonly posts: readonly Post[];
	readonly owner: Actor;
	/** Cookies of people, each another one. */
	readonly cookies: readonly string[];

	private constructor(
		cluster: Cluster,
		posts: readonly Post[],
		people: Actor[],
		cookies: string[],
	) {
		this.cluster = cluster;
		this.posts = posts;
		this.owner = people[0] as Actor;
		this.cookies = cookies;
	}

	static async open({ posts: count, people }: { posts: number; people: number }): Promise<Site> {
		sweepServers();
		const cluster = await Cluster.create(await firstFree(firstPort));
		Object.assign(process.env, {
			DATABASE_URL: cluster.url(),
			ORIGIN: 'http://localhost:4173',
			AUTH_SECRET: 'a secret of the tests, never used to serve',
			EVALUATORS: '1',
			LOG_LEVEL: 'silent',
		});
		await applyMigrations(cluster.url());
		const posts = await Promise.all(Array.from({ length: count }, () => makePost(cluster)));
		const team = await makeTeam();
		const members: Actor[] = [];
		for (let n = 1; n <= people; n++)
			members.push(await makeMember(team, 'engineer', `Robin Example ${n}`));
		const cookies = await Promise.all(members.map((member) => signIn(member)));
		const site = new Site(cluster, posts, members, cookies);
		await Promise.all(posts.map((post) => site.start(post)));
		return site;
	}

	/** Starts a process that does not run. */
	async start(post: Post): Promise<void> {
		post.server = await startSyncServer(
			{
				DATABASE_URL: this.cluster.url(post.back.port),
				PORT: String(post.port),
				LOG_LEVEL: process.env.FAULTS_LOG ?? 'info',
			},
			nameInList(),
		);
	}

	async kill(post: Post): Promise<void> {
		const { server } = post;
		post.server = undefined;
		await server?.stop('SIGKILL');
	}

	/** Processes that ended although nobody killed them. */
	get crashed(): string[] {
		return this.posts
			.filter(({ server }) => server && !isAlive(server.pid))
			.map((_, index) => `server ${index + 1} ended by itself`);
	}

	/** Brings everything back that a fault has left broken. */
	async mend(): Promise<void> {
		await this.cluster.start();
		for (const post of this.posts) {
			post.front.mend();
			post.back.mend();
			if (post.server && !isAlive(post.server.pid)) post.server = undefined;
			if (!post.server) await this.start(post);
		}
	}

	async close(): Promise<void> {
		await Promise.all(this.posts.map((post) => this.kill(post)));
		await Promise.all(this.posts.flatMap(({ front, back }) => [front.close(), back.close()]));
		await closePool();
		await closeDb();
		await this.cluster.remove();
	}
}

async function makePost(cluster: Cluster): Promise<Post> {
	const port = await freePort();
	const [front, back] = await Promise.all([Wire.open(port), Wire.open(cluster.port)]);
	return { front, back, port, server: undefined };
}

/** Where pages connect to a process. */
export const addressOf = ({ front }: Post) => syncUrl(front.port);
