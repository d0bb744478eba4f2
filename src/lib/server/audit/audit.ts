import type { Actor } from '../auth/access';
import type { Connection } from '../db/client';
import { auditEvent } from '../db/schema/review';

interface Change {
	before?: unknown;
	after?: unknown;
	reason?: string;
}

/** Writes down who did what, in the transaction that does it. `action` is a verb in the past, `subject` "note:<id>". */
export async function record(
	connection: Connection,
	actor: Pick<Actor, 'personId' | 'teamId'>,
	action: string,
	subject: string,
	change: Change = {},
): Promise<void> {
	await connection
		.insert(auditEvent)
		.values({ teamId: actor.teamId, personId: actor.personId, action, subject, ...change });
}
