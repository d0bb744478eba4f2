import { AppError } from '$lib/errors';
import { closeDb } from '$lib/server/db/client';
import { env } from '$lib/server/env';
import * as checkpoints from '$lib/server/signed-record/checkpoints';
import * as keys from '$lib/server/signed-record/keys';
import { verifyAll } from '$lib/server/signed-record/verification';
import { inspect } from 'node:util';

/**
 * Verifies the whole database and ends with 0 where everything holds, with 1 where something does not. The key in
 * SIGNING_KEY_FILE and the checkpoints in CHECKPOINT_FOLDER are what it is held against.
 */
async function run(): Promise<number> {
	const { SIGNING_KEY_FILE, CHECKPOINT_FOLDER } = env();
	const trustedKeys = SIGNING_KEY_FILE === '' ? [] : [keys.current().id];
	const kept = CHECKPOINT_FOLDER === '' ? [] : await checkpoints.readFolder(CHECKPOINT_FOLDER);
	const from = performance.now();
	const report = await verifyAll({ trustedKeys, checkpoints: kept });
	const seconds = ((performance.now() - from) / 1000).toFixed(1);
	for (const { kind, place, sentence } of report.faults) say(`${kind}: ${place}. ${sentence}`);
	if (trustedKeys.length === 0) say('No key was given (SIGNING_KEY_FILE): any key was believed.');
	if (kept.length === 0) {
		say(
			'No checkpoint was given (CHECKPOINT_FOLDER): entries removed from the end are not noticed.',
		);
	}
	const { entries, revisions, candidates, auditEntries, faults } = report;
	say(
		`${revisions} revisions, ${candidates} candidates, ${entries} signed entries and ${auditEntries} audit entries against ${report.checkpoints} checkpoints in ${seconds} s: ${faults.length === 0 ? 'everything holds' : `${faults.length} faults`}.`,
	);
	return faults.length === 0 ? 0 : 1;
}

function say(line: string): void {
	process.stdout.write(`${line}\n`);
}

try {
	process.exitCode = await run();
} catch (error) {
	say(error instanceof AppError ? error.message : inspect(error));
	process.exitCode = 2;
}
await closeDb();
