import { log } from '$lib/server/log';

/** Something to be done before the process ends. It is left behind after `limitMs`, and the next one begins. */
interface Step {
	name: string;
	limitMs: number;
	run: () => Promise<unknown>;
}

/**
 * Runs the steps in order at the first SIGTERM or SIGINT and then ends the process: with 0, or with 1 where
 * one of them failed. Later signals change nothing.
 */
export function onSignal(steps: readonly Step[]): void {
	let ending: Promise<void> | undefined;
	const end = (signal: NodeJS.Signals) => {
		log().info({ signal }, 'shutting down');
		ending ??= runSteps(steps).then((good) => process.exit(good ? 0 : 1));
	};
	process.on('SIGTERM', end);
	process.on('SIGINT', end);
}

/** Takes no longer than the limits of the steps together. Resolves to false where one of them failed. */
export async function runSteps(steps: readonly Step[]): Promise<boolean> {
	let good = true;
	for (const { name, limitMs, run } of steps) {
		try {
			if (!(await within(limitMs, run()))) {
				log().warn({ step: name, limitMs }, 'a step of the shutdown was cut short');
			}
		} catch (error) {
			log().error({ err: error, step: name }, 'a step of the shutdown failed');
			good = false;
		}
	}
	return good;
}

/** Whether the work ends in time. */
async function within(ms: number, work: Promise<unknown>): Promise<boolean> {
	let timer: NodeJS.Timeout | undefined;
	const time = new Promise<false>((resolve) => (timer = setTimeout(() => resolve(false), ms)));
	try {
		return await Promise.race([work.then(() => true as const), time]);
	} finally {
		clearTimeout(timer);
	}
}
