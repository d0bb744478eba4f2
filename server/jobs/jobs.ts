import PgBoss from 'pg-boss';
import { env } from '$lib/server/env';
import { log } from '$lib/server/log';
import { gather } from '$lib/server/mail/daily';
import * as delivery from '$lib/server/mail/delivery';
import { remind } from '$lib/server/revisions/reminders';
import { queueSchema } from './queues';
import { verifyNightly } from './nightly';

/** Pause between looks for mail that waits. */
const lookMs = 2000;

/** Does what nobody waits for at a page: mail, reminders, the record's nightly verification. */
export class Jobs {
	readonly #boss: PgBoss;
	#timer: NodeJS.Timeout | undefined;
	#looking: Promise<void> | undefined;

	constructor() {
		this.#boss = new PgBoss({
			connectionString: env().DATABASE_URL,
			schema: queueSchema,
			migrate: false,
			max: 3,
			application_name: 'halfdigit jobs',
		});
		this.#boss.on('error', (error) => log().warn({ err: error }, 'the queue of jobs'));
	}

	async start(): Promise<void> {
		const boss = this.#boss;
		await boss.start();
		await boss.work<{ id: string }>('mail', { pollingIntervalSeconds: 1, batchSize: 20 }, (jobs) =>
			deliverAll(jobs.map(({ data }) => data.id)),
		);
		await boss.work<{ id: string }>('mail-dead', { pollingIntervalSeconds: 5 }, async ([job]) => {
			if (job) await delivery.giveUp(job.data.id);
		});
		await boss.work('each-morning', async () => {
			await remind();
			await gather();
		});
		await boss.work('each-night', verifyNightly);
		await boss.schedule('each-morning', '30 5 * * *', {}, { tz: 'UTC' });
		await boss.schedule('each-night', '15 2 * * *', {}, { tz: 'UTC' });
		if (env().SMTP_URL !== '') this.#look();
	}

	async stop(): Promise<void> {
		clearTimeout(this.#timer);
		this.#timer = undefined;
		await this.#looking;
		await this.#boss.stop({ graceful: true, timeout: 5000, wait: true });
	}

	/** Queues mail that was written since, and leaves to people what broke off. */
	#look(): void {
		this.#looking = this.#queueMail().catch((error: unknown) =>
			log().warn({ err: error }, 'mail could not be queued'),
		);
		this.#timer = setTimeout(() => this.#look(), lookMs);
		this.#timer.unref();
	}

	async #queueMail(): Promise<void> {
		await delivery.settleBroken();
		for (const id of await delivery.takeWaiting()) await this.#boss.send('mail', { id });
	}
}

/** Hands mail over, one after the other. Throws at the end where some is to be tried again; what is sent is left alone then. */
async function deliverAll(ids: readonly string[]): Promise<void> {
	let failure: unknown;
	for (const id of ids) {
		try {
			await delivery.deliver(id);
		} catch (error) {
			failure = error;
		}
	}
	if (failure !== undefined) throw failure as Error;
}
