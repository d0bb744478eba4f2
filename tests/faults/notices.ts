import type { Stage } from './stage';

/** Tells every process things that are not so: of rows that do not exist, of old ones, the same twice, and no sense at all. */
export async function notified(stage: Stage): Promise<number> {
	const client = await stage.site.cluster.connect();
	const { random } = stage;
	const payloads = stage.notes.flatMap(({ id: noteId }) => [
		JSON.stringify({ noteId, seq: 1 }),
		JSON.stringify({ noteId, seq: 1 }),
		JSON.stringify({ noteId, seq: random.below(100_000) }),
		JSON.stringify({ noteId, seq: 'many' }),
		JSON.stringify({ noteId: 7 }),
		Buffer.from(random.bytes(12)).toString('base64'),
	]);
	try {
		for (const payload of payloads)
			await client.query('select pg_notify($1, $2)', [channel, payload]);
	} finally {
		await client.end();
	}
	return payloads.length;
}

const channel = 'halfdigit';
