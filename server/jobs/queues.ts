import PgBoss from 'pg-boss';

/** Tables of the queues lie in a schema of their own. */
export const queueSchema = 'jobs';

/** Every queue, those first that others send their dead jobs to. */
const queues: PgBoss.Queue[] = [
	// pg-boss's own, for what is due by the clock; it makes it itself where it may.
	{ name: '__pgboss__send-it' },
	{ name: 'mail-dead' },
	{
		name: 'mail',
		deadLetter: 'mail-dead',
		retryLimit: 6,
		retryDelay: 30,
		retryBackoff: true,
		expireInSeconds: 120,
	},
	{ name: 'each-morning', retryLimit: 3, retryDelay: 60 },
	{ name: 'each-night', retryLimit: 1, retryDelay: 600, expireInSeconds: 3600 },
];

/** Makes the queues' tables; needs the role that owns the database's tables. */
export async function makeQueues(ownerUrl: string): Promise<void> {
	const boss = new PgBoss({
		connectionString: ownerUrl,
		schema: queueSchema,
		schedule: false,
		supervise: false,
		max: 1,
	});
	let failure: Error | undefined;
	boss.on('error', (error) => (failure = error));
	await boss.start();
	for (const queue of queues) await boss.createQueue(queue.name, queue);
	await boss.stop({ graceful: false });
	if (failure) throw failure;
}
