import type { Blocker } from '$lib/schemas/review';

/** Answer of the last attempt to propose: why it was refused, and what was typed. */
export type ProposalAnswer =
	| ({ message: string; blockers?: Blocker[] } & Partial<
			Record<'purpose' | 'changes' | 'due' | 'approver', string>
	  >)
	| null;
