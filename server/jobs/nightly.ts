import { env } from '$lib/server/env';
import { log } from '$lib/server/log';
import * as checkpoints from '$lib/server/signed-record/checkpoints';
import * as keys from '$lib/server/signed-record/keys';
import { verifyAll } from '$lib/server/signed-record/verification';

/** Verifies the whole record against the key and the checkpoints kept outside, and says so in the log; faults as errors. */
export async function verifyNightly(): Promise<void> {
	const { SIGNING_KEY_FILE, CHECKPOINT_FOLDER } = env();
	const { faults, ...counts } = await verifyAll({
		trustedKeys: SIGNING_KEY_FILE === '' ? [] : [keys.current().id],
		checkpoints: CHECKPOINT_FOLDER === '' ? [] : await checkpoints.readFolder(CHECKPOINT_FOLDER),
	});
	for (const fault of faults) log().error({ fault }, 'the signed record does not verify');
	log().info({ ...counts, faults: faults.length }, 'the signed record was verified');
}
