import type { Evaluation } from '$lib/calc/results';
import { applyChanges } from '$lib/protocol/changes';
import { fork, type ChildProcess } from 'node:child_process';
import { readFile } from 'node:fs/promises';
import type { Readable } from 'node:stream';
import { placeBytes, placeDescriptor, readPlace, type Answer, type Task } from './exchange';

export interface ChildSettings {
	entry: string;
	/** Flags for Node.js besides the memory bound. */
	execArgv?: string[];
	heapMegabytes: number;
	residentMegabytes: number;
}

/** How a task ended: with results, or with the process that had it; `place` is where it was then. */
export type Outcome =
	| { kind: 'done'; results: Evaluation }
	| { kind: 'tooLong' | 'tooLarge' | 'gone'; place: { cell: number; line: number } | undefined };

/** Told how many trials are drawn, and how many there will be. */
export type OnProgress = (drawn: number, total: number) => void;

/** What is around a task. */
interface Around {
	onProgress?: OnProgress | undefined;
	/** Results the caller has of the same note: only what changed since comes from a process that made them. */
	last?: Evaluation | undefined;
}

const memoryCheckMs = 20;
const startMs = 15_000;

/** One evaluator process. It takes one task at a time and is not used again after it was stopped. */
export class Child {
	/** Resolves when the process can be asked; to false where it never could. */
	readonly ready: Promise<boolean>;
	readonly exited: Promise<void>;
	readonly #process: ChildProcess;
	readonly #settings: ChildSettings;
	#alive = true;
	#place: Buffer = Buffer.alloc(0);
	#settle: ((outcome: Outcome) => void) | undefined;
	#task: number | undefined;
	#note: string | undefined;
	#around: Around = {};
	/** What it answered, with the task that asked for it. */
	readonly #answered = new WeakMap<Evaluation, number>();

	constructor(settings: ChildSettings) {
		this.#settings = settings;
		this.#process = fork(settings.entry, [], {
			// Nothing of this process's environment reaches a formula.
			env: {},
			execArgv: [`--max-old-space-size=${settings.heapMegabytes}`, ...(settings.execArgv ?? [])],
			stdio: ['ignore', 'ignore', 'ignore', 'ipc', 'pipe'],
		});
		const places = this.#process.stdio[placeDescriptor] as Readable;
		places.on('data', (bytes: Buffer) => {
			const all = Buffer.concat([this.#place, bytes]);
			const whole = all.length - (all.length % placeBytes);
			this.#place = all.subarray(Math.max(0, whole - placeBytes));
		});
		places.on('error', () => undefined);
		this.exited = new Promise((resolve) => {
			const end = () => {
				this.#alive = false;
				this.#finish({ kind: 'gone', place: this.#lastPlace() });
				resolve();
			};
			this.#process.once('exit', end);
			this.#process.once('error', end);
		});
		this.ready = this.#started();
		this.#process.on('message', (message) => {
			const answer = message as Answer;
			if (answer.kind === 'ready' || answer.id !== this.#task) return;
			if (answer.kind === 'progress') return this.#around.onProgress?.(answer.drawn, answer.total);
			const results =
				answer.kind === 'done'
					? answer.results
					: this.#around.last && applyChanges(this.#around.last, answer.changes);
			if (!results) return this.#stop('gone');
			this.#answered.set(results, answer.id);
			this.#finish({ kind: 'done', results });
		});
		// A program that forgot to close the pool may still end; the child follows when the channel closes.
		this.#process.unref();
		this.#process.channel?.unref();
		(places as Readable & { unref?: () => void }).unref?.();
	}

	get alive(): boolean {
		return this.#alive;
	}

	/** The note whose evaluation it had last. */
	get note(): string | undefined {
		return this.#note;
	}

	/** Gives the process a task and stops it where it overruns. Never rejects. */
	run(asked: Task, limitMs: number, around: Around = {}): Promise<Outcome> {
		const since = around.last && this.#answered.get(around.last);
		const task = { ...asked, ...(since !== undefined && { since }) };
		this.#note = task.note ?? this.#note;
		this.#around = around;
		this.#place = Buffer.alloc(0);
		this.#task = task.id;
		const outcome = new Promise<Outcome>((resolve) => (this.#settle = resolve));
		const timer = setTimeout(() => this.#stop('tooLong'), limitMs);
		const watch = setInterval(() => void this.#watchMemory(), memoryCheckMs);
		if (!this.#alive) this.#finish({ kind: 'gone', place: undefined });
		else
			this.#process.send(task, (error) => {
				if (error) this.#stop('gone');
			});
		return outcome.finally(() => {
			clearTimeout(timer);
			clearInterval(watch);
		});
	}

	/** Ends the process, at once where it does not go by itself. */
	async close(): Promise<void> {
		if (this.#process.connected) this.#process.disconnect();
		const timer = setTimeout(() => this.#process.kill('SIGKILL'), 500);
		await this.exited;
		clearTimeout(timer);
	}

	#started(): Promise<boolean> {
		return new Promise((resolve) => {
			const timer = setTimeout(() => {
				this.#process.kill('SIGKILL');
				resolve(false);
			}, startMs);
			this.#process.once('message', () => {
				clearTimeout(timer);
				resolve(true);
			});
			void this.exited.then(() => {
				clearTimeout(timer);
				resolve(false);
			});
		});
	}

	/** Ends the process and with it what it computes. */
	cancel(): void {
		this.#stop('gone');
	}

	#stop(kind: 'tooLong' | 'tooLarge' | 'gone'): void {
		this.#alive = false;
		this.#process.kill('SIGKILL');
		this.#finish({ kind, place: this.#lastPlace() });
	}

	#finish(outcome: Outcome): void {
		this.#settle?.(outcome);
		this.#settle = undefined;
		this.#task = undefined;
		this.#around = {};
	}

	#lastPlace(): { cell: number; line: number } | undefined {
		return this.#place.length >= placeBytes ? readPlace(this.#place) : undefined;
	}

	/** Buffers outside the heap are not bounded by Node.js, so the whole process is looked at (Linux). */
	async #watchMemory(): Promise<void> {
		const file = await readFile(`/proc/${this.#process.pid ?? 0}/statm`, 'utf8').catch(() => '');
		const pages = Number(file.split(' ')[1] ?? 0);
		const megabytes = (pages * 4096) / 1_048_576;
		if (megabytes > this.#settings.residentMegabytes && this.#task !== undefined)
			this.#stop('tooLarge');
	}
}
