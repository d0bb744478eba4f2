import { AppError } from '$lib/errors';
import type { Blocker, Waiver } from '$lib/schemas/review';

/** The waivers that an approver's reasons make, by the fields of the form, and what still blocks. */
export function waivedBy(
	blockers: readonly Blocker[],
	reasons: readonly (readonly [field: string, reason: string])[],
): { waivers: Waiver[]; left: Blocker[] } {
	const waivers = reasons.map(([field, reason]) => {
		const found = blockers.find(({ waivable }) => waivable?.field === field)?.waivable;
		if (!found) {
			throw new AppError('conflict', 'A reason is given for a requirement that cannot be waived.');
		}
		if (reason.length > 2000)
			throw new AppError('invalid', 'A reason has at most 2 000 characters.');
		const [cell = '', line = ''] = field.split(':');
		return { cell, line: Number(line), requirement: found.requirement, reason };
	});
	const waived = new Set(reasons.map(([field]) => field));
	const left = blockers.filter(({ waivable }) => !waivable || !waived.has(waivable.field));
	return { waivers, left };
}
