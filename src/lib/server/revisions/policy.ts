import type { Policy } from '$lib/schemas/review';
import { eq, getTableColumns } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { signOffPolicy } from '../db/schema/review';

/** What holds for a team that has set nothing; the table's defaults say the same. */
const usual: Policy = {
	checkers: 1,
	authorsMayCheck: false,
	authorsMayApprove: false,
	checkersMayApprove: false,
	undecidedBlocks: false,
	commentsBlock: false,
	waivers: false,
	identifyAfterMinutes: 480,
};

/** The policy of the actor's team. */
export async function get(actor: Actor): Promise<Policy> {
	demand(actor, 'readFrozen');
	return read(db(), actor.teamId);
}

/** Sets it; it counts from the next signature, also on candidates that are open. */
export async function set(actor: Actor, policy: Policy): Promise<void> {
	demand(actor, 'administer');
	await db().transaction(async (tx) => {
		const before = await read(tx, actor.teamId);
		await tx
			.insert(signOffPolicy)
			.values({ teamId: actor.teamId, ...policy })
			.onConflictDoUpdate({ target: signOffPolicy.teamId, set: policy });
		await audit.record(tx, actor, 'policy changed', `team:${actor.teamId}`, {
			before,
			after: policy,
		});
	});
}

/** A team's policy within a deed. */
export async function read(connection: Connection, teamId: string): Promise<Policy> {
	const { teamId: key, ...columns } = getTableColumns(signOffPolicy);
	const [row] = await connection.select(columns).from(signOffPolicy).where(eq(key, teamId));
	return row ?? usual;
}
