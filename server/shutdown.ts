import { log } from '$lib/server/log';

const limitMs = 7000;

/**
 * Runs the steps in order at the first SIGTERM or SIGINT and then ends the process, whether a step fails
 * or takes too long. Later signals change nothing.
 */
export function onSignal(steps: () => Promise<void>): void {
	let ending: Promise<void> | undefined;
	const end = (signal: NodeJS.Signals) => {
		ending ??= run(signal, steps);
	};
	process.on('SIGTERM', end);
	process.on('SIGINT', end);
}

async function run(signal: NodeJS.Signals, steps: () => Promise<void>): Promise<void> {
	log().info({ signal }, 'shutting down');
	const watchdog = setTimeout(() => {
		log().error('the shutdown took too long');
		process.exit(1);
	}, limitMs);
	try {
		await steps();
	} catch (error) {
		log().error({ err: error }, 'the shutdown failed');
		process.exitCode = 1;
	}
	clearTimeout(watchdog);
	process.exit();
}

/** The promise's end or the time's, whichever comes first. */
export async function within(ms: number, work: Promise<unknown>): Promise<void> {
	let timer: NodeJS.Timeout | undefined;
	const time = new Promise<void>((resolve) => (timer = setTimeout(resolve, ms)));
	await Promise.race([work, time]);
	clearTimeout(timer);
}
