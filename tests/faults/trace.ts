import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync, rmSync } from 'node:fs';

const program = '/usr/bin/strace';
const calls = 'fdatasync,fsync,recvfrom,sendto,write,writev';

/** One call of the kernel: who, what with, and from when to when, in seconds. */
interface Call {
	pid: number;
	text: string;
	from: number;
	to: number;
}

/** What processes ask of the kernel, written down while they run. */
export class Trace {
	readonly #strace: ChildProcess;
	readonly #file: string;

	private constructor(strace: ChildProcess, file: string) {
		this.#strace = strace;
		this.#file = file;
	}

	/** Begins to trace processes and all that they start; where that is not possible here, the reason. */
	static async begin(pids: readonly number[], file: string): Promise<Trace | string> {
		if (!existsSync(program)) return 'strace is not installed';
		const words = ['-f', '-ttt', '-T', '-s', '400', '-e', `trace=${calls}`, '-o', file];
		const strace = spawn(program, [...words, ...pids.flatMap((pid) => ['-p', String(pid)])], {
			stdio: ['ignore', 'ignore', 'pipe'],
		});
		let said = '';
		const attached = new Promise<boolean>((resolve) => {
			strace.stderr.on('data', (bytes: Buffer) => {
				said += bytes.toString();
				if (said.split(' attached').length > pids.length) resolve(true);
			});
			strace.once('exit', () => resolve(false));
		});
		return (await attached) ? new Trace(strace, file) : `strace cannot be used: ${said.trim()}`;
	}

	/** Ends the trace, not the processes. */
	async end(): Promise<Call[]> {
		const gone = once(this.#strace, 'exit');
		this.#strace.kill('SIGINT');
		await gone;
		const text = readFileSync(this.#file, 'utf8');
		rmSync(this.#file);
		return read(text);
	}
}

const whole = /^(\d+) +(\d+\.\d+) (.*?)(?: <(\d+\.\d+)>)?$/;

/** Reads strace's lines; calls that others came between stand on two of them. */
export function read(text: string): Call[] {
	const begun = new Map<number, Call>();
	const done: Call[] = [];
	for (const line of text.split('\n')) {
		const [, pidText, at, what = '', took] = whole.exec(line) ?? [];
		if (!pidText) continue;
		const pid = Number(pidText);
		const from = Number(at);
		const earlier = begun.get(pid);
		if (what.endsWith('<unfinished ...>')) begun.set(pid, { pid, text: what, from, to: Infinity });
		else if (what.startsWith('<... ') && earlier) {
			begun.delete(pid);
			done.push({ ...earlier, text: earlier.text + what, to: from });
		} else done.push({ pid, text: what, from, to: from + Number(took ?? 0) });
	}
	return done.sort((a, b) => a.from - b.from);
}

/**
 * Edits whose acknowledgement went out before as many transactions with edits were through: asked for, the log flushed to disk
 * after that, and confirmed after that. The edits were made one at a time, in this order.
 */
export function acknowledgedTooEarly(calls: readonly Call[], edits: readonly string[]): string[] {
	const through = confirmations(calls);
	return edits.filter((id, index) => {
		const acknowledgement = new RegExp(`ids.{0,9}${id}`);
		const sent = calls.find(
			({ text }) => /^writev?\(/.test(text) && acknowledgement.test(text),
		)?.from;
		return sent === undefined || through.filter((at) => at < sent).length <= index;
	});
}

/** Instants at which transactions with edits were confirmed after a flush that ended behind their COMMIT. */
function confirmations(calls: readonly Call[]): number[] {
	const flushes = calls.filter(({ text }) => /^f(data)?sync\(.*= 0/.test(text)).map(({ to }) => to);
	const withEdits = new Set<number>();
	const asked = new Map<number, number>();
	const confirmed: number[] = [];
	for (const { pid, text, from, to } of calls) {
		if (text.startsWith('recvfrom(')) {
			if (text.includes('insert into \\"note_update\\"')) withEdits.add(pid);
			if (text.includes('commit\\0') && withEdits.delete(pid)) asked.set(pid, to);
		} else if (text.startsWith('sendto(') && text.includes('COMMIT\\0')) {
			const since = asked.get(pid);
			if (since === undefined) continue;
			asked.delete(pid);
			if (flushes.some((flush) => flush > since && flush <= from)) confirmed.push(from);
		}
	}
	return confirmed;
}
