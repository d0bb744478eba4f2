import { AppError } from '$lib/errors';

const known = ['web', 'sync', 'jobs'] as const;
export type Role = (typeof known)[number];

/** What this process does, from ROLES. */
export function readRoles(text: string): Set<Role> {
	const words = text.split(',').map((word) => word.trim());
	const roles = new Set(known.filter((role) => words.includes(role)));
	if (roles.size === 0 || roles.size !== new Set(words).size) {
		throw new AppError('invalid', `ROLES: must be some of ${known.join(', ')}, not "${text}".`);
	}
	return roles;
}

/** Refuses heap flags in NODE_OPTIONS: every child would take them, and the evaluators' memory cap with them. */
export function checkNodeOptions(options: string | undefined): void {
	const flag = /--(max|min|initial)[-_]((old|new|semi)[-_])?(space|heap|semi)\S*/.exec(
		options ?? '',
	);
	if (flag) {
		throw new AppError(
			'invalid',
			`NODE_OPTIONS holds ${flag[0]}. It would lift the memory limit of the evaluators, so Halfdigit does not start with it. Give the flag to node on the command line instead.`,
		);
	}
}
