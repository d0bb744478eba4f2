import type { MailKind, Said } from '$lib/schemas/mail';
import { and, eq, inArray } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { mail, mailPreference } from '../db/schema/mail';
import { membership } from '../db/schema/people';

/** Which kind of mail tells of what. */
const kinds: Record<Said['what'], MailKind> = {
	check: 'requests',
	approve: 'requests',
	returned: 'returns',
	frozen: 'revisions',
	withdrawn: 'revisions',
	mentioned: 'mentions',
	due: 'reminders',
};

interface Telling {
	teamId: string;
	/** Names what is told; the same is told to a person once. */
	key: string;
	said: Said;
}

/**
 * Writes mail to people of a team, in the transaction of what it tells of. Each gets it as they chose; who is in the
 * team no more gets none.
 */
export async function tell(
	connection: Connection,
	personIds: Iterable<string>,
	{ teamId, key, said }: Telling,
): Promise<void> {
	const ids = [...new Set(personIds)];
	if (ids.length === 0) return;
	const kind = kinds[said.what];
	const people = await connection
		.select({ id: membership.personId, way: mailPreference.way })
		.from(membership)
		.leftJoin(
			mailPreference,
			and(eq(mailPreference.personId, membership.personId), eq(mailPreference.kind, kind)),
		)
		.where(and(eq(membership.teamId, teamId), inArray(membership.personId, ids)));
	const rows = people
		.filter(({ way }) => way !== 'never')
		.map(({ id, way }) => ({
			teamId,
			personId: id,
			kind,
			key,
			said: [said],
			state: way === 'once a day' ? ('gathered' as const) : ('waiting' as const),
		}));
	if (rows.length > 0) await connection.insert(mail).values(rows).onConflictDoNothing();
}
