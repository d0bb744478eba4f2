import type { Stage } from './stage';

/** Tells every process things that are not so: of rows that do not exist, of old ones, the same twice, and no sense at all. */
export async function notified(stage: Stage): Promise<number> {
	const client = await stage.site.cluster.connect();
	const { random } = stage;
	const payloads = stage.notes.flatMap(({ id }) => [
		...[1, 1, random.below(100_000), 'many', null].map((seq) => ({
			from: 'x',
			seqs: { [id]: seq },
		})),
		...['nobody', [[1]], [['a', {}, 7]], null].map((people) => ({
			from: 'x',
			people: { [id]: people },
		})),
		...[
			{ from: 7, asks: 7 },
			{ from: 'x', seqs: 7, people: 7 },
			{ noteId: 7 },
			7,
			null,
			[],
			'words',
		],
		{ noteId: id, seq: 'many' },
		{ noteId: id, about: 7 },
	]);
	const texts = payloads.map((payload) => JSON.stringify(payload));
	texts.push('', '{', Buffer.from(random.bytes(12)).toString('base64'));
	try {
		for (const text of texts) await client.query('select pg_notify($1, $2)', [channel, text]);
	} finally {
		await client.end();
	}
	return texts.length;
}

const channel = 'halfdigit';
