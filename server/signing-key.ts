import { AppError } from '$lib/errors';
import { closeDb, db } from '$lib/server/db/client';
import * as entries from '$lib/server/signed-record/entries';
import * as keys from '$lib/server/signed-record/keys';
import { inspect } from 'node:util';

/**
 * Lets another key take over: `node build/signing-key.js NEW_FILE` while SIGNING_KEY_FILE still names the present one,
 * which signs that. Afterwards SIGNING_KEY_FILE names the new file.
 */
try {
	const [, , file] = process.argv;
	if (file === undefined) throw new AppError('invalid', 'Name the file of the new key.');
	const next = keys.read(file);
	await db().transaction((tx) => entries.rotate(tx, next));
	process.stdout.write(
		`Key ${next.id} is in the record. Let SIGNING_KEY_FILE name ${file} from now on and start the servers again.\n`,
	);
} catch (error) {
	process.stderr.write(`${error instanceof AppError ? error.message : inspect(error)}\n`);
	process.exitCode = 1;
}
await closeDb();
