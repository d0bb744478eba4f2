import { log } from '$lib/server/log';
import * as checkpoints from '$lib/server/signed-record/checkpoints';

const hourMs = 3_600_000;
const dayMs = 24 * hourMs;

/** Signs a checkpoint of the record each day it has grown. Returns what ends that. */
export function signDaily(): () => void {
	const look = () => {
		sign().catch((error: unknown) => log().error({ err: error }, 'no daily checkpoint was made'));
	};
	const timer = setInterval(look, hourMs);
	timer.unref();
	look();
	return () => clearInterval(timer);
}

async function sign(): Promise<void> {
	const newest = await checkpoints.latest();
	// Without a signature there is nothing to check.
	if (newest && Date.now() - newest.at.getTime() >= dayMs) await checkpoints.makeNow();
}
