import type { SkippedLine } from '$lib/calc/note-lines';
import type { Cell, Evaluation, Options } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import { env } from '../env';
import { log } from '../log';
import { Child, type ChildSettings, type OnProgress, type Outcome } from './child';
import { withoutResults } from './unfinished';

export interface PoolSettings extends ChildSettings {
	/** Notes computed at once. One child more is kept warm to take over where one is stopped. */
	size: number;
	/** Time of the first try, and of each of the tries that leave out the lines which stopped earlier ones. */
	limitsMs: readonly number[];
	/** The same where trials or the details of all quantities are asked for. */
	longLimitsMs: readonly number[];
}

const mostStartFailures = 3;

/**
 * While very many notes wait for their turn, a child rests so many times as long as it computed: keeping edits and
 * telling them to others goes before figures, and each note gets the figures of its newest state only.
 */
const restShare = 3;
const longestRestMs = 100;
const manyWaiting = 8;

/** Curves are bounded by their operations; a busy machine must not stop what another one finishes. */
const curveShare = 4;

/** What an evaluation is for. */
export interface Circumstances {
	/** The note, where it is likely to be evaluated again after an edit. */
	note?: string | undefined;
	/** Its results before the edit. What did not change stays the same object where the same child computes it. */
	last?: Evaluation | undefined;
	/** Told how many trials are drawn. */
	onProgress?: OnProgress | undefined;
	/** Stops it; the evaluation then throws AppError. */
	signal?: AbortSignal | undefined;
}

/** Children that compute notes: each answer is in time, whatever a line does, and no line harms the next note. */
export class Pool {
	readonly #settings: PoolSettings;
	readonly #children = new Set<Child>();
	readonly #idle: Child[] = [];
	readonly #waiting: { take: (child: Child) => void; fail: (error: Error) => void }[] = [];
	readonly #turns: Turns;
	/** Long evaluations are made one at a time, so that edits never wait for them. */
	readonly #longTurns = new Turns(1);
	#startFailures = 0;
	#nextTask = 1;
	#closed = false;

	constructor(settings: PoolSettings) {
		this.#settings = settings;
		this.#turns = new Turns(settings.size);
		for (let i = 0; i <= settings.size; i++) this.#spawn();
	}

	/**
	 * Computes a note in a child. Lines that take too long or too much carry a fault, the others their results.
	 * Throws AppError `unavailable` where no child can be started or the pool is closed.
	 */
	async evaluate(
		cells: readonly Cell[],
		options: Options,
		circumstances: Circumstances = {},
	): Promise<Evaluation> {
		const { signal } = circumstances;
		const isLong = options.monteCarlo !== undefined || options.detail === 'all';
		const turns = isLong ? this.#longTurns : this.#turns;
		if (this.#closed) throw closedError();
		await turns.take();
		const from = performance.now();
		try {
			if (signal?.aborted) throw stoppedError();
			return await this.#attempt(cells, options, isLong, circumstances);
		} finally {
			const rest = turns.isCrowded ? restShare * (performance.now() - from) : 0;
			if (rest > 0) setTimeout(() => turns.give(), Math.min(rest, longestRestMs));
			else turns.give();
		}
	}

	/** Ends all children; resolves when they are gone. */
	async close(): Promise<void> {
		this.#closed = true;
		for (const { fail } of this.#waiting.splice(0)) fail(closedError());
		await Promise.all([...this.#children].map((child) => child.close()));
	}

	async #attempt(
		cells: readonly Cell[],
		options: Options,
		isLong: boolean,
		{ note, last, onProgress, signal }: Circumstances,
	): Promise<Evaluation> {
		const skip: SkippedLine[] = [];
		const { limitsMs, longLimitsMs } = this.#settings;
		const share = cells.some(({ kind }) => kind === 'curve') ? curveShare : 1;
		const left = isLong ? [...longLimitsMs] : limitsMs.map((limit) => share * limit);
		let isForgiven = false;
		for (let limitMs = left.shift(); limitMs !== undefined; limitMs = left.shift()) {
			const child = await this.#acquire(note);
			const id = this.#nextTask++;
			const task = { id, cells, options, skip, ...(note !== undefined && { note }) };
			const cancel = () => child.cancel();
			signal?.addEventListener('abort', cancel);
			const outcome = await child.run(task, limitMs, { onProgress, last });
			signal?.removeEventListener('abort', cancel);
			this.#release(child);
			if (outcome.kind === 'done') return outcome.results;
			if (this.#closed) throw closedError();
			if (signal?.aborted) throw stoppedError();
			// It may have been killed for no fault of the note's; only the second time a line is to blame.
			if (outcome.kind === 'gone' && !isForgiven) {
				isForgiven = true;
				left.unshift(limitMs);
				continue;
			}
			const blamed = blame(outcome, cells);
			log().warn({ outcome: outcome.kind, ...blamed }, 'an evaluation was stopped');
			if (blamed) skip.push(blamed);
		}
		if (skip.length === 0)
			throw new AppError('unavailable', 'Formulas cannot be computed at the moment.');
		return withoutResults(cells, skip);
	}

	async #acquire(note: string | undefined): Promise<Child> {
		if (this.#closed) throw closedError();
		const known = note === undefined ? -1 : this.#idle.findIndex((child) => child.note === note);
		const [same] = known < 0 ? [] : this.#idle.splice(known, 1);
		if (same?.alive) return same;
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

/** Lets so many at once. */
class Turns {
	readonly #waiting: (() => void)[] = [];
	#running = 0;

	constructor(private readonly most: number) {}

	/** Whether many wait. */
	get isCrowded(): boolean {
		return this.#waiting.length > manyWaiting;
	}

	async take(): Promise<void> {
		if (this.#running >= this.most)
			await new Promise<void>((resolve) => this.#waiting.push(resolve));
		this.#running += 1;
	}

	give(): void {
		this.#running -= 1;
		this.#waiting.shift()?.();
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

function stoppedError(): AppError {
	return new AppError('unavailable', 'This was stopped.');
}

function closedError(): AppError {
	return new AppError('unavailable', 'The server is stopping.');
}

let shared: Pool | undefined;

/** Computes a note in one of this process's children. Throws AppError `unavailable`. */
export function evaluateInChild(
	cells: readonly Cell[],
	options: Options,
	circumstances?: Circumstances,
): Promise<Evaluation> {
	const { EVALUATOR_ENTRY: entry, EVALUATORS: size } = env();
	shared ??= new Pool({
		entry,
		size,
		heapMegabytes: 192,
		residentMegabytes: 400,
		limitsMs: [800, 600, 400],
		longLimitsMs: [30_000, 5_000],
	});
	return shared.evaluate(cells, options, circumstances);
}

/** Ends this process's children. The next evaluation starts new ones. */
export async function closePool(): Promise<void> {
	const pool = shared;
	shared = undefined;
	await pool?.close();
}
