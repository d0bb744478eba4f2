import type { Fault } from '../fault';
import { childrenOf, evaluatorsOf } from '../processes';
import { Spoilt } from '../spoilt';
import type { Stage } from '../stage';
import { pause } from '../until';

type Deed = (stage: Stage) => Promise<void>;

const shortly = (stage: Stage) => pause(stage.random.below(stage.isFull ? 3000 : 500));

const deeds: Record<string, Deed> = {
	killServer: async (stage) => {
		const post = stage.random.pick(stage.site.posts);
		await stage.site.kill(post);
		await shortly(stage);
		await stage.site.start(post);
	},
	killPostgres: async ({ site, random }) => {
		await site.cluster.kill(random.pick(['first', 'all', 'one']));
		await site.cluster.start();
	},
	restartPostgres: async ({ site }) => {
		await site.cluster.stop();
		await site.cluster.start();
	},
	stopServer: async (stage) => {
		const pid = stage.random.pick(stage.site.posts).server?.pid ?? 0;
		process.kill(pid, 'SIGSTOP');
		await shortly(stage);
		process.kill(pid, 'SIGCONT');
	},
	stopPostgres: async (stage) => {
		const { pid } = stage.site.cluster;
		const pids = [pid, ...childrenOf(pid)];
		for (const each of pids) process.kill(each, 'SIGSTOP');
		await shortly(stage);
		for (const each of pids.reverse()) process.kill(each, 'SIGCONT');
	},
	killEvaluators: ({ site, random }) => {
		for (const pid of evaluatorsOf(random.pick(site.posts).server?.pid ?? 0))
			process.kill(pid, 'SIGKILL');
		return Promise.resolve();
	},
	cutPages: ({ site, random }) => {
		for (const { front } of site.posts) front.cutSome(random, 0.4);
		return Promise.resolve();
	},
	silencePages: async (stage) => {
		for (const { front } of stage.site.posts) front.silenceSome(stage.random, 0.4);
		await shortly(stage);
		for (const { front } of stage.site.posts) front.mend();
	},
	silenceDatabase: async (stage) => {
		const { back } = stage.random.pick(stage.site.posts);
		back.silenceSome(stage.random, 0.5);
		await shortly(stage);
		back.mend();
	},
	slowDatabase: async (stage) => {
		const { back } = stage.random.pick(stage.site.posts);
		back.delayMs = 200;
		await shortly(stage);
		back.mend();
	},
	cutCommits: async (stage) => {
		const spoilt = new Spoilt(stage.random);
		spoilt.left = 3;
		const { back } = stage.random.pick(stage.site.posts);
		back.spoil = spoilt.cutCommits;
		await shortly(stage);
		back.mend();
	},
	deafen: async (stage) => {
		const { back } = stage.random.pick(stage.site.posts);
		back.spoil = new Spoilt(stage.random).deafen;
		back.cutSome(stage.random, 1);
		await shortly(stage);
		back.mend();
	},
	turnClocks: ({ writers, random }) => {
		for (const { clock } of writers) clock.offMs = Math.round((random.next() * 2 - 1) * 3_600_000);
		return Promise.resolve();
	},
	reloadPages: async ({ writers, random }) => {
		const chosen = writers.filter(() => random.chance(0.15));
		await Promise.all(chosen.map((writer) => writer.load()));
	},
};

export const nemesis: Fault = {
	id: 'nemesis',
	fault: 'all of it in an order that is drawn, clocks of pages off by up to an hour',
	notes: 4,
	writers: 24,
	fewer: { notes: 2, writers: 8 },
	runs: 4,
	run: async (stage) => {
		stage.type(8);
		const end = performance.now() + (stage.isFull ? 40_000 : 6000);
		const names = Object.keys(deeds);
		while (performance.now() < end) {
			await deeds[stage.random.pick(names)]?.(stage);
			stage.injected += 1;
			// Sometimes the next thing breaks before this one is over.
			if (stage.random.chance(0.6)) await pause(stage.random.below(stage.isFull ? 1500 : 300));
		}
		await stage.site.mend();
		await stage.recovers();
	},
};
