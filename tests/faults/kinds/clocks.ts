import type { Fault } from '../fault';
import { runBy } from '../clock';

const hourMs = 3_600_000;

export const clocksOff: Fault = {
	id: 'clocks-off',
	fault: 'clocks of pages an hour off, and jumping, with sockets cut',
	run: async (stage) => {
		for (const writer of stage.writers) {
			writer.clock.offMs = stage.random.pick([-hourMs, 0, hourMs]);
			stage.injected += 1;
			await writer.load();
			const off = runBy(writer.clock, () => Date.now()) - Date.now();
			if (Math.abs(off - writer.clock.offMs) > 1000) stage.complain('a clock goes right');
		}
		stage.type(20);
		for (let n = 0; n < (stage.isFull ? 20 : 2); n++) {
			await stage.acknowledges(60);
			for (const writer of stage.writers) {
				writer.clock.offMs = Math.round((stage.random.next() * 2 - 1) * hourMs);
				stage.injected += 1;
			}
			stage.random.pick(stage.site.posts).front.cutSome(stage.random, 0.5);
			await stage.recovers();
		}
	},
};
