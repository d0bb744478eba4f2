import { closeDb } from '$lib/server/db/client';
import { beginNewEpochs } from '$lib/server/notes/epochs';
import { inspect } from 'node:util';

// Run after a backup was restored, before pages come back: `node build/restored.js`.
try {
	const count = await beginNewEpochs();
	process.stdout.write(
		`${count} notes got a new epoch. Pages that were open before load them anew.\n`,
	);
} catch (error) {
	process.stderr.write(`${inspect(error)}\n`);
	process.exitCode = 1;
}
await closeDb();
