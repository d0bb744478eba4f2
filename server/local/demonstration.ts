import { closeDb } from '$lib/server/db/client';
import { closePool } from '$lib/server/evaluation/pool';
import { load } from './demonstration/load';
import { accounts } from './demonstration/people';

// Loads the demonstration unless it is there; the last line tells the accounts to whoever started it.
try {
	await load();
} finally {
	await closePool();
	await closeDb();
}
process.stdout.write(`${JSON.stringify({ accounts: Object.values(accounts) })}\n`);
