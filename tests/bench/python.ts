import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

interface Answer {
	ms: number;
	standardUncertainty: number;
}

/** Debian's interpreter, whose packages are Debian's; another one on the path has packages of its own or none. */
const interpreter = '/usr/bin/python3';

/** What a script beside this file prints; undefined, with a notice, where it cannot run. */
export function python(script: string, ...args: string[]): Answer | undefined {
	const file = fileURLToPath(new URL(script, import.meta.url));
	const ran = spawnSync(interpreter, [file, ...args], {
		encoding: 'utf8',
		env: { OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1' },
	});
	if (ran.status === 0) return JSON.parse(ran.stdout) as Answer;
	const why = ran.stderr.trim().split('\n').at(-1) ?? 'it does not start';
	process.stdout.write(`no peer from ${script}: ${why}\n`);
	return undefined;
}
