import type { Fault } from '../fault';
import { childrenOf } from '../processes';
import { pause } from '../until';

export const serverStopped: Fault = {
	id: 'server-stopped',
	fault: 'SIGSTOP of a sync process, later SIGCONT',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 10 : 2); n++) {
			await stage.acknowledges(50);
			const pid = stage.random.pick(stage.site.posts).server?.pid ?? 0;
			process.kill(pid, 'SIGSTOP');
			stage.injected += 1;
			await pause(stage.random.below(stage.isFull ? 6000 : 800));
			process.kill(pid, 'SIGCONT');
			await stage.recovers();
		}
	},
};

export const postgresStopped: Fault = {
	id: 'postgres-stopped',
	fault: 'SIGSTOP of all of PostgreSQL, later SIGCONT',
	run: async (stage) => {
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 6 : 1); n++) {
			await stage.acknowledges(50);
			const { pid } = stage.site.cluster;
			const pids = [pid, ...childrenOf(pid)];
			for (const each of pids) process.kill(each, 'SIGSTOP');
			stage.injected += 1;
			await pause(stage.random.below(stage.isFull ? 6000 : 800));
			for (const each of pids.reverse()) process.kill(each, 'SIGCONT');
			await stage.recovers();
		}
	},
};
