import type { Fault } from '../fault';
import { notified } from '../notices';
import { Spoilt } from '../spoilt';
import { pause, until } from '../until';

export const socketsCut: Fault = {
	id: 'sockets-cut',
	fault: 'sockets of pages cut at random',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 150 : 8); n++) {
			await stage.acknowledges(10);
			for (const { front } of stage.site.posts) stage.injected += front.cutSome(stage.random, 0.3);
		}
		await stage.recovers();
	},
};

export const halfOpen: Fault = {
	id: 'half-open',
	fault: 'sockets of pages that swallow everything',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 12 : 2); n++) {
			await stage.acknowledges(30);
			for (const { front } of stage.site.posts)
				stage.injected += front.silenceSome(stage.random, 0.5);
			await pause(stage.random.below(stage.isFull ? 8000 : 800));
			for (const { front } of stage.site.posts) front.mend();
			await stage.recovers();
		}
	},
};

export const neverTold: Fault = {
	id: 'half-open-for-good',
	fault: 'sockets of pages that swallow everything and never break: the page finds out',
	run: async (stage) => {
		stage.type(5);
		await stage.acknowledges(30);
		for (const { front } of stage.site.posts)
			stage.injected += front.silenceSome(stage.random, 0.5);
		// The page's own watch is 30 s long; from there on it is as after any lost connection.
		await pause(30_000);
		await stage.recovers();
	},
};

/** Brings every connection of one process's on which it listens into silence, new ones too. */
export const notifyLost: Fault = {
	id: 'notify-lost',
	fault: 'one process of three cut off from NOTIFY, others told nonsense',
	run: async (stage) => {
		const [deaf] = stage.site.posts;
		if (!deaf) return;
		const spoilt = new Spoilt(stage.random);
		// Its listening connection is made anew, and this time is seen.
		deaf.back.spoil = spoilt.deafen;
		for (const link of deaf.back.links) link.cut();
		stage.type(10);
		for (let n = 0; n < (stage.isFull ? 20 : 2); n++) {
			await stage.acknowledges(10);
			stage.injected += await notified(stage);
			await stage.arrives(4000);
		}
		stage.injected += spoilt.done;
		if (spoilt.done === 0) stage.complain('nobody was cut off');
		deaf.back.mend();
		await stage.recovers();
	},
};

export const commitCut: Fault = {
	id: 'commit-cut',
	fault: 'the connection cut during COMMIT: before it, behind it, and before its answer',
	run: async (stage) => {
		const spoilt = new Spoilt(stage.random);
		const wanted = stage.isFull ? 200 : 12;
		spoilt.left = wanted;
		for (const { back } of stage.site.posts) back.spoil = spoilt.cutCommits;
		stage.type(20);
		await until(
			() => spoilt.done >= wanted,
			stage.isFull ? 240_000 : 40_000,
			'too few commits cut',
		);
		for (const { back } of stage.site.posts) back.mend();
		stage.injected += spoilt.done;
		await stage.recovers();
	},
};
