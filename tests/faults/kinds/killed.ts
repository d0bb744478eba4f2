import type { Fault } from '../fault';
import { evaluatorsOf } from '../processes';
import type { Stage } from '../stage';
import { pause } from '../until';

/** Edits a second and writer: more than people type, and not so many that the writers themselves take the machine. */
const fast = 60;
/** Edits to be acknowledged between two kills. */
const between = { short: 150, full: 1000 };
const many = { notes: 4, writers: 12 };

/** Kills at an instant that is drawn, starts again, and waits until everybody can write. */
async function killing(
	stage: Stage,
	kills: { short: number; full: number },
	once: () => Promise<void>,
): Promise<void> {
	stage.type(fast);
	const form = stage.isFull ? 'full' : 'short';
	for (let kill = 0; kill < kills[form]; kill++) {
		await stage.acknowledges(between[form]);
		await pause(stage.random.below(50));
		await once();
		stage.injected += 1;
		await stage.recovers();
	}
}

export const serverKilled: Fault = {
	id: 'server-killed',
	fault: 'kill -9 of a sync process',
	...many,
	runs: 3,
	run: (stage) =>
		killing(stage, { short: 2, full: 14 }, async () => {
			const post = stage.random.pick(stage.site.posts);
			await stage.site.kill(post);
			await stage.site.start(post);
		}),
};

export const postgresKilled: Fault = {
	id: 'postgres-killed',
	fault: 'kill -9 of PostgreSQL: its first process, all, or one that serves',
	...many,
	runs: 2,
	run: (stage) =>
		killing(stage, { short: 2, full: 18 }, async () => {
			await stage.site.cluster.kill(stage.random.pick(['first', 'all', 'one']));
			await stage.site.cluster.start();
		}),
};

export const bothKilled: Fault = {
	id: 'both-killed',
	fault: 'kill -9 of every sync process and of PostgreSQL at once',
	...many,
	runs: 2,
	run: (stage) =>
		killing(stage, { short: 1, full: 15 }, async () => {
			const { cluster, posts } = stage.site;
			await Promise.all([cluster.kill('all'), ...posts.map((post) => stage.site.kill(post))]);
			await cluster.start();
			await Promise.all(posts.map((post) => stage.site.start(post)));
		}),
};

export const postgresRestarted: Fault = {
	id: 'postgres-restarted',
	fault: 'PostgreSQL stopped in good order and started again',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 8 : 1); n++) {
			await stage.acknowledges(50);
			await stage.site.cluster.stop();
			stage.injected += 1;
			await stage.site.cluster.start();
			await stage.recovers();
		}
	},
};

export const rollingRestart: Fault = {
	id: 'rolling-restart',
	fault: 'every sync process in turn ended by SIGTERM and started again',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 4 : 1); n++) {
			for (const post of stage.site.posts) {
				await stage.acknowledges(30);
				const { server } = post;
				post.server = undefined;
				const code = await server?.stop('SIGTERM');
				if (code !== 0) stage.complain(`a process that was asked to end ended with ${code}`);
				stage.injected += 1;
				await stage.site.start(post);
			}
			await stage.recovers();
		}
	},
};

export const evaluatorKilled: Fault = {
	id: 'evaluator-killed',
	fault: 'kill -9 of every evaluator',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 30 : 3); n++) {
			await stage.acknowledges(30);
			killEvaluators(stage);
			await stage.recovers();
		}
		// With nobody typing afterwards the figures must come by themselves.
		await stage.rest();
		for (const writer of stage.writers) writer.writeLine();
		for (let n = 0; n < 4; n++) {
			killEvaluators(stage);
			await pause(20);
		}
	},
};

function killEvaluators(stage: Stage): void {
	for (const { server } of stage.site.posts) {
		for (const pid of evaluatorsOf(server?.pid ?? 0)) {
			process.kill(pid, 'SIGKILL');
			stage.injected += 1;
		}
	}
}
