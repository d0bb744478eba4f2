import { spawnSync } from 'node:child_process';

/** Whether a program of the system is there; where it is not, a notice says what is left out and why. */
export function hasProgram(program: string, debianPackage: string, whatFor: string): boolean {
	if (spawnSync(program, ['--version']).error === undefined) return true;
	process.stderr.write(
		`${whatFor} is left out: there is no program \`${program}\` here. Debian has it in the package ${debianPackage}.\n`,
	);
	return false;
}

/** What a program prints for an input. Throws where it cannot be run, or prints nothing and says why. */
export function printed(program: string, args: readonly string[], input: string): string {
	const { error, stdout, stderr } = spawnSync(program, args, {
		input,
		encoding: 'utf8',
		timeout: 20_000,
	});
	if (error) throw error;
	if (stdout === '' && stderr !== '') throw new Error(stderr);
	return stdout;
}

/** Debian's interpreter, whose packages are Debian's; another one on the path has packages of its own or none. */
export const python = '/usr/bin/python3';

/** Whether Debian's Python has a module; where it has not, a notice says what is left out and why. */
export function hasPythonModule(module: string, debianPackage: string, whatFor: string): boolean {
	if (spawnSync(python, ['-c', `import ${module}`]).status === 0) return true;
	process.stderr.write(
		`${whatFor} is left out: Python has no module \`${module}\` here. Debian has it in the package ${debianPackage}.\n`,
	);
	return false;
}
