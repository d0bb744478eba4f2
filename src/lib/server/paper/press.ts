import { fork, type ChildProcess } from 'node:child_process';
import { readFile } from 'node:fs/promises';
import { AppError } from '$lib/errors';
import { log } from '../log';

/** What a typesetter is asked. */
export interface PressTask {
	id: number;
	/** A sealed revision's file. */
	file: string;
	paper: 'a4' | 'us-letter';
	/** Address of this installation, for the QR code. */
	origin: string;
}

/** What it answers: that it can be asked, the paper, or why there is none. */
export type PressAnswer =
	| { kind: 'ready' }
	| { kind: 'done'; id: number; pdf: Uint8Array }
	| { kind: 'failed'; id: number; why: string };

export interface PressSettings {
	/** File the child runs. */
	entry: string;
	limitMs: number;
	residentMegabytes: number;
	/** Papers that may wait for their turn. */
	mostWaiting: number;
	/** Time without work after which the child is let go. */
	idleMs: number;
}

const memoryCheckMs = 50;
const heapMegabytes = 256;

/** Typesets in one child process, one paper at a time: what takes too long or too much is ended, and nothing else with it. */
export class Press {
	readonly #settings: PressSettings;
	#child: ChildProcess | undefined;
	#turn: Promise<unknown> = Promise.resolve();
	#waiting = 0;
	#nextTask = 1;
	#idle: NodeJS.Timeout | undefined;
	#closed = false;

	constructor(settings: PressSettings) {
		this.#settings = settings;
	}

	/**
	 * The PDF of a sealed revision. Throws AppError `unavailable` where too many wait, or where it takes too long or
	 * cannot be set.
	 */
	async print(task: Omit<PressTask, 'id'>): Promise<Buffer> {
		if (this.#closed) throw closing();
		if (this.#waiting >= this.#settings.mostWaiting)
			throw new AppError(
				'unavailable',
				'Many PDFs are being made just now. Try again in a moment.',
			);
		this.#waiting += 1;
		const before = this.#turn;
		const printed = before.then(() => this.#set(task));
		this.#turn = printed.catch(() => undefined);
		try {
			return await printed;
		} finally {
			this.#waiting -= 1;
		}
	}

	/** Ends the child. */
	close(): void {
		this.#closed = true;
		this.#end();
	}

	async #set(task: Omit<PressTask, 'id'>): Promise<Buffer> {
		if (this.#closed) throw closing();
		clearTimeout(this.#idle);
		const id = this.#nextTask++;
		const answer = await this.#ask({ ...task, id });
		this.#idle = setTimeout(() => this.#end(), this.#settings.idleMs).unref();
		if (answer.kind === 'done') return Buffer.from(answer.pdf);
		log().error({ why: answer.why }, 'a paper could not be set');
		throw new AppError(
			'unavailable',
			'The PDF of this revision cannot be made. Its JSON file has all of it.',
		);
	}

	/** Never rejects; a child that ends or overruns has failed. */
	#ask(task: PressTask): Promise<Exclude<PressAnswer, { kind: 'ready' }>> {
		const child = this.#running();
		return new Promise((resolve) => {
			const done = (answer: Exclude<PressAnswer, { kind: 'ready' }>) => {
				clearTimeout(timer);
				clearInterval(watch);
				child.off('message', heard);
				child.off('exit', gone);
				child.off('error', gone);
				resolve(answer);
			};
			const failed = (why: string) => {
				this.#end();
				done({ kind: 'failed', id: task.id, why });
			};
			const heard = (message: unknown) => {
				const answer = message as PressAnswer;
				if (answer.kind !== 'ready' && answer.id === task.id) done(answer);
			};
			const gone = () => failed('the typesetter ended');
			const timer = setTimeout(() => failed('it took too long'), this.#settings.limitMs);
			const watch = setInterval(() => {
				void residentOf(child).then((megabytes) => {
					if (megabytes > this.#settings.residentMegabytes) failed('it took too much memory');
				});
			}, memoryCheckMs);
			child.on('message', heard);
			child.once('exit', gone);
			child.once('error', gone);
			child.send(task, (error) => {
				if (error) failed(error.message);
			});
		});
	}

	#running(): ChildProcess {
		if (this.#child?.connected && this.#child.exitCode === null) return this.#child;
		const child = fork(this.#settings.entry, [], {
			// Nothing of this process's environment reaches what people wrote.
			env: {},
			execArgv: [`--max-old-space-size=${heapMegabytes}`],
			stdio: ['ignore', 'ignore', 'ignore', 'ipc'],
			serialization: 'advanced',
		});
		child.on('error', () => undefined);
		child.unref();
		child.channel?.unref();
		return (this.#child = child);
	}

	#end(): void {
		clearTimeout(this.#idle);
		this.#child?.kill('SIGKILL');
		this.#child = undefined;
	}
}

/** Megabytes of a process (Linux); what the typesetter takes is outside the heap that Node.js bounds. */
async function residentOf({ pid = 0 }: ChildProcess): Promise<number> {
	const file = await readFile(`/proc/${pid}/statm`, 'utf8').catch(() => '');
	return (Number(file.split(' ')[1] ?? 0) * 4096) / 1_048_576;
}

function closing(): AppError {
	return new AppError('unavailable', 'The server is stopping.');
}
