import { z } from 'zod';

export const role = z.enum(['reader', 'engineer', 'approver', 'administrator']);
export type Role = z.infer<typeof role>;

/** What a person may be allowed to do in a team. */
export type Deed =
	| 'readFrozen'
	| 'readWorkingCopy'
	| 'write'
	| 'comment'
	| 'share'
	| 'check'
	| 'approve'
	| 'administer';

const deeds: Readonly<Record<Role, readonly Deed[]>> = {
	reader: ['readFrozen'],
	engineer: ['readFrozen', 'readWorkingCopy', 'write', 'comment', 'share', 'check'],
	approver: ['readFrozen', 'readWorkingCopy', 'write', 'comment', 'share', 'check', 'approve'],
	administrator: ['readFrozen', 'readWorkingCopy', 'comment', 'share', 'administer'],
};

/** Whether a role allows a deed; who may sign a particular candidate is decided by its authorship besides. */
export function may(who: Role, deed: Deed): boolean {
	return deeds[who].includes(deed);
}
