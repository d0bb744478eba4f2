import type { Fault } from '../fault';
import { Flood } from '../flood';
import { Hog } from '../hog';
import { megabytesOf } from '../processes';
import { SmallDisk } from '../small-disk';
import type { Stage } from '../stage';
import { comesTrue, pause } from '../until';

/** Megabytes by which a process may grow while the database takes nothing. */
const mostGrown = 200;

/** What must hold while the database takes nothing: nobody is told that anything was saved, and no process grows. */
async function outage(stage: Stage, lastsMs: number, during?: () => Promise<void>): Promise<void> {
	const { posts } = stage.site;
	const before = posts.map(({ server }) => megabytesOf(server?.pid ?? 0));
	// What was committed just before may still be on its way to the pages.
	await pause(300);
	const acknowledged = stage.acknowledged;
	await Promise.all([pause(lastsMs), during?.()]);
	if (stage.acknowledged > acknowledged)
		stage.complain(`${stage.acknowledged - acknowledged} edits acknowledged meanwhile`);
	if (stage.writers.every((writer) => writer.isSaved))
		stage.complain('every page said "saved" meanwhile');
	stage.site.crashed.forEach((sentence) => stage.complain(sentence));
	for (const [index, { server }] of posts.entries()) {
		const grown = server ? megabytesOf(server.pid) - (before[index] ?? 0) : 0;
		if (grown > mostGrown) stage.complain(`a process grew by ${Math.round(grown)} MB meanwhile`);
	}
}

const ten = { notes: 2, writers: 10 };

export const postgresDown: Fault = {
	id: 'postgres-down',
	fault: 'PostgreSQL away for a while, and more edits than are kept',
	...ten,
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 3 : 1); n++) {
			await stage.acknowledges(50);
			const flood = await Flood.open(stage, n);
			await stage.site.cluster.stop();
			stage.injected += 1;
			await outage(stage, stage.isFull ? 12_000 : 1500, async () => {
				if (!(await flood.pour())) stage.complain('a process took edits without end');
			});
			flood.close();
			await stage.site.cluster.start();
			await stage.recovers();
		}
	},
};

export const postgresSlow: Fault = {
	id: 'postgres-slow',
	fault: 'everything to and from PostgreSQL late, by up to 30 s',
	...ten,
	run: async (stage) => {
		stage.type(20);
		for (const delayMs of stage.isFull ? [300, 3000, 30_000] : [1000]) {
			await stage.acknowledges(50);
			for (const { back } of stage.site.posts) back.delayMs = delayMs;
			stage.injected += 1;
			if (delayMs < 1000) await pause(5000);
			// The answer to a commit that was on its way comes after the delay, and rightly counts.
			else await outage(stage, delayMs - 500);
			for (const { back } of stage.site.posts) back.mend();
			await stage.recovers();
		}
	},
};

export const postgresUnresponsive: Fault = {
	id: 'postgres-unresponsive',
	fault: 'connections to PostgreSQL open, and no answer on any',
	...ten,
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 3 : 1); n++) {
			await stage.acknowledges(50);
			for (const { back } of stage.site.posts) {
				back.isSilent = true;
				stage.injected += back.silenceSome(stage.random, 1);
			}
			await outage(stage, stage.isFull ? 12_000 : 1500);
			for (const { back } of stage.site.posts) back.mend();
			await stage.recovers();
		}
	},
};

export const outOfConnections: Fault = {
	id: 'out-of-connections',
	fault: 'every connection of PostgreSQL taken by others',
	...ten,
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 3 : 1); n++) {
			await stage.acknowledges(50);
			// They stand still until all is taken: whoever knocks holds a place until he is sent away.
			for (const { server, back } of stage.site.posts) {
				process.kill(server?.pid ?? 0, 'SIGSTOP');
				back.cut();
			}
			const hog = await Hog.takeAll(stage.site.cluster).finally(() => {
				for (const { server, back } of stage.site.posts) {
					back.mend();
					process.kill(server?.pid ?? 0, 'SIGCONT');
				}
			});
			stage.injected += 1;
			try {
				await outage(stage, stage.isFull ? 10_000 : 1500);
			} finally {
				await hog.release();
			}
			await stage.recovers();
		}
	},
};

export const diskFull: Fault = {
	id: 'disk-full',
	fault: 'the disk of the edits full',
	...ten,
	run: async (stage) => {
		const { cluster } = stage.site;
		const disk = await SmallDisk.mount(cluster);
		if (typeof disk === 'string') return stage.complain(disk);
		try {
			await disk.holdEdits();
			stage.type(20);
			for (let n = 0; n < (stage.isFull ? 3 : 1); n++) {
				await stage.acknowledges(50);
				disk.fill();
				stage.injected += 1;
				// What the files have room for may still be stored; after that nothing is.
				const stuck = () => performance.now() - stage.lastAcknowledgedAt > 700;
				if (!(await comesTrue(stuck, 60_000))) stage.complain('the disk never was full');
				await outage(stage, stage.isFull ? 10_000 : 1000);
				disk.empty();
				await stage.recovers();
			}
		} finally {
			await stage.rest();
			disk.empty();
			await disk.remove();
		}
	},
};
