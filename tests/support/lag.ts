import { spawn } from 'node:child_process';
import { once } from 'node:events';

/** Asks a server for an answer every 20 ms, in a process of its own, and tells how long the slowest took. */
export interface LagProbe {
	/** Ends it; the longest answer in ms, of those that came. */
	stop(): Promise<number>;
}

const program = `
	let worst = 0;
	const ask = async () => {
		const start = performance.now();
		try {
			await (await fetch(process.argv[1])).text();
			worst = Math.max(worst, performance.now() - start);
		} catch {}
	};
	const clock = setInterval(() => void ask(), 20);
	process.stdin.on('end', () => { clearInterval(clock); console.log(worst); process.exit(); }).resume();
`;

export function probeLag(port: number): LagProbe {
	const child = spawn(process.execPath, ['-e', program, `http://127.0.0.1:${port}/`], {
		stdio: ['pipe', 'pipe', 'inherit'],
	});
	let output = '';
	child.stdout.on('data', (chunk: Buffer) => (output += chunk.toString()));
	return {
		stop: async () => {
			child.stdin.end();
			await once(child, 'close');
			return Number(output);
		},
	};
}
