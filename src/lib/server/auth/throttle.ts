import { AppError } from '$lib/errors';
import { eq, lt, sql } from 'drizzle-orm';
import { db, type Connection } from '../db/client';
import { signInAttempt } from '../db/schema/people';

/** How many failures are free, and how long the wait after one grows at most. It starts at 1 s and doubles. */
interface Limit {
	free: number;
	longestMs: number;
}

const limits = {
	/** One account tried from one address. */
	pair: { free: 5, longestMs: 15 * 60_000 },
	/** Any accounts tried from one address. */
	address: { free: 30, longestMs: 15 * 60_000 },
	/** One account tried from anywhere. Short, and never for an address its owner signed in from: nobody can lock them out. */
	account: { free: 50, longestMs: 60_000 },
} satisfies Record<string, Limit>;

interface Count {
	failures: number;
	/** Milliseconds since the last failure. */
	sinceMs: number;
}

/**
 * Counts a try at a password before it is verified, so that tries at the same time count too. Returns the
 * try's id for `succeed`. Throws AppError `tooMany`, with the time to wait, and counts nothing then.
 */
export async function begin(email: string, address: string): Promise<string> {
	return await db().transaction(async (tx) => {
		for (const key of [`account ${email}`, `address ${address}`]) {
			await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${key}, 0))`);
		}
		const waitMs = Math.max(
			wait(limits.pair, await countPair(tx, email, address)),
			wait(limits.address, await count(tx, sql`address = ${address}`)),
			wait(limits.account, await countAccount(tx, email, address)),
		);
		if (waitMs > 0) {
			throw new AppError('tooMany', `Too many tries. Wait ${duration(waitMs)}, then try again.`, {
				details: { waitMs },
			});
		}
		const [row] = await tx
			.insert(signInAttempt)
			.values({ email, address, succeeded: false })
			.returning({ id: signInAttempt.id });
		if (!row) throw new Error('the try was not stored');
		return row.id;
	});
}

/** Marks a try as right; failures before it no longer count against this account from this address. */
export async function succeed(connection: Connection, attempt: string): Promise<void> {
	await connection
		.update(signInAttempt)
		.set({ succeeded: true })
		.where(eq(signInAttempt.id, attempt));
	await connection
		.delete(signInAttempt)
		.where(lt(signInAttempt.at, sql`now() - interval '30 days'`));
}

function countPair(tx: Connection, email: string, address: string): Promise<Count> {
	return count(
		tx,
		sql`email = ${email} and address = ${address} and at > coalesce((
			select max(s.at) from sign_in_attempt s
			where s.email = ${email} and s.address = ${address} and s.succeeded), '-infinity')`,
	);
}

function countAccount(tx: Connection, email: string, address: string): Promise<Count> {
	return count(
		tx,
		sql`email = ${email} and not exists (
			select from sign_in_attempt s
			where s.email = ${email} and s.address = ${address} and s.succeeded)`,
	);
}

async function count(tx: Connection, which: ReturnType<typeof sql>): Promise<Count> {
	const { rows } = await tx.execute<{ failures: number; since: number }>(sql`
		select count(*)::int as failures,
			coalesce(extract(epoch from clock_timestamp() - max(at)) * 1000, 0)::float8 as since
		from sign_in_attempt
		where not succeeded and at > now() - interval '1 hour' and ${which}`);
	return { failures: rows[0]?.failures ?? 0, sinceMs: rows[0]?.since ?? 0 };
}

function wait({ free, longestMs }: Limit, { failures, sinceMs }: Count): number {
	if (failures < free) return 0;
	return Math.min(longestMs, 1000 * 2 ** (failures - free)) - sinceMs;
}

function duration(ms: number): string {
	const seconds = Math.ceil(ms / 1000);
	if (seconds >= 120) return `${Math.ceil(seconds / 60)} minutes`;
	return seconds === 1 ? '1 second' : `${seconds} seconds`;
}
