import type { SkippedLine } from '$lib/calc/note-lines';
import type { Cell, Evaluation, Options } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import { env } from '../env';
import { log } from '../log';
import { Child, type ChildSettings, type Outcome } from './child';
import { withoutResults } from './unfinished';

export interface PoolSettings extends ChildSettings {
	/** Notes computed at once. One child more is kept warm to take over where one is stopped. */
	size: number;
	/** Time of the first try, and of each of the tries that leave out the lines which stopped earlier ones. */
	limitsMs: readonly number[];
}

const mostStartFailures = 3;

/** Children that compute notes: each answer is in time, whatever a line does, and no line harms the next note. */
export class Pool {
	readonly #settings: PoolSettings;
	readonly #children = new Set<Child>();
	readonly #idle: Child[] = [];
	readonly #waiting: { take: (child: Child) => void; fail: (error: Error) => void }[] = [];
	readonly #queue: (() => void)[] = [];
	#running = 0;
	#startFailures = 0;
	#nextTask = 1;
	#closed = false;

	constructor(settings: PoolSettings) {
		this.#settings = settings;
		for (let i = 0; i <= settings.size; i++) this.#spawn();
	}

	/**
	 * Computes a note in a child. Lines that take too long or too much carry a fault, the others their results.
	 * Throws AppError `unavailable` where no child can be started or the pool is closed.
	 */
	async evaluate(cells: readonly Cell[], options: Options): Promise<Evaluation> {
		await this.#turn();
		try {
			return await this.#attempt(cells, options);
		} finally {
			this.#running -= 1;
			this.#queue.shift()?.();
		}
	}

	/** Ends all children; resolves when they are gone. */
	async close(): Promise<void> {
		this.#closed = true;
		for (const { fail } of this.#waiting.splice(0)) fail(closedError());
		await Promise.all([...this.#children].map((child) => child.close()));
	}

	async #attempt(cells: readonly Cell[], options: Options): Promise<Evaluation> {
		const skip: SkippedLine[] = [];
		for (const limitMs of this.#settings.limitsMs) {
			const child = await this.#acquire();
			const id = this.#nextTask++;
			const outcome = await child.run({ id, cells, options, skip }, limitMs);
			this.#release(child);
			if (outcome.kind === 'done') return outcome.results;
			if (this.#closed) throw closedError();
			const blamed = blame(outcome, cells);
			log().warn({ outcome: outcome.kind, ...blamed }, 'an evaluation was stopped');
			if (blamed) skip.push(blamed);
		}
		if (skip.length === 0)
			throw new AppError('unavailable', 'Formulas cannot be computed at the moment.');
		return withoutResults(cells, skip);
	}

	async #turn(): Promise<void> {
		if (this.#closed) throw closedError();
		if (this.#running >= this.#settings.size)
			await new Promise<void>((resolve) => this.#queue.push(resolve));
		this.#running += 1;
	}

	async #acquire(): Promise<Child> {
		if (this.#closed) throw closedError();
		for (let child = this.#idle.shift(); child; child = this.#idle.shift())
			if (child.alive) return child;
		if (this.#children.size === 0) this.#spawn();
		return new Promise((take, fail) => this.#waiting.push({ take, fail }));
	}

	#release(child: Child): void {
		if (!child.alive) return;
		const next = this.#waiting.shift();
		if (next) next.take(child);
		else this.#idle.push(child);
	}

	#spawn(): void {
		const child = new Child(this.#settings);
		this.#children.add(child);
		void child.ready.then((ready) => {
			if (ready) this.#startFailures = 0;
			if (ready) this.#release(child);
		});
		void child.exited.then(async () => {
			this.#children.delete(child);
			if (this.#closed) return;
			this.#startFailures += (await child.ready) ? 0 : 1;
			if (this.#startFailures < mostStartFailures) this.#spawn();
			else if (this.#children.size === 0) this.#giveUp();
		});
	}

	/** Those that wait hear of it; the next call tries anew. */
	#giveUp(): void {
		this.#startFailures = mostStartFailures - 1;
		log().error({ entry: this.#settings.entry }, 'evaluators do not start');
		for (const { fail } of this.#waiting.splice(0))
			fail(new AppError('unavailable', 'Formulas cannot be computed at the moment.'));
	}
}

/** The line a stopped child was at; undefined where it had not begun, so that no line is to blame. */
function blame(
	outcome: Exclude<Outcome, { kind: 'done' }>,
	cells: readonly Cell[],
): SkippedLine | undefined {
	const { place } = outcome;
	const cell = place && cells[place.cell];
	if (!cell) return undefined;
	// A child that ended by itself ran out of its heap.
	const code = outcome.kind === 'tooLong' ? 'tooLong' : 'tooLarge';
	return { cell: cell.id, line: place.line, code };
}

function closedError(): AppError {
	return new AppError('unavailable', 'The server is stopping.');
}

let shared: Pool | undefined;

/** Computes a note in one of this process's children. Throws AppError `unavailable`. */
export function evaluateInChild(cells: readonly Cell[], options: Options): Promise<Evaluation> {
	const { EVALUATOR_ENTRY: entry, EVALUATORS: size } = env();
	shared ??= new Pool({
		entry,
		size,
		heapMegabytes: 192,
		residentMegabytes: 400,
		limitsMs: [800, 600, 400],
	});
	return shared.evaluate(cells, options);
}

/** Ends this process's children. The next evaluation starts new ones. */
export async function closePool(): Promise<void> {
	const pool = shared;
	shared = undefined;
	await pool?.close();
}
