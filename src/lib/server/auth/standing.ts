import type { Role } from '$lib/schemas/role';
import { and, eq, gt, inArray, sql } from 'drizzle-orm';
import { db } from '../db/client';
import { membership, session } from '../db/schema/people';

/** The present role behind each session that is still alive, by the session's hash. */
export async function standing(sessions: readonly string[]): Promise<Map<string, Role>> {
	const rows = await db()
		.select({ session: session.sessionToken, role: membership.role })
		.from(session)
		.innerJoin(
			membership,
			and(eq(membership.personId, session.userId), eq(membership.teamId, session.teamId)),
		)
		.where(
			and(
				inArray(session.sessionToken, [...sessions]),
				gt(session.expires, sql`now()`),
				gt(session.endsAt, sql`now()`),
			),
		);
	return new Map(rows.map((row) => [row.session, row.role]));
}
