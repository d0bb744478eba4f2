import { and, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as signIn from '$lib/server/auth/sign-in';
import * as throttle from '$lib/server/auth/throttle';
import { db } from '$lib/server/db/client';
import { signInAttempt } from '$lib/server/db/schema/people';
import { createDatabase, type TestDatabase } from '../support/database';
import { givePassword, makeMember, makeTeam, testPassword } from '../support/people';

let database: TestDatabase;
beforeAll(async () => {
	database = await createDatabase();
});
afterAll(() => database.drop());

let next = 0;
const address = () => `192.0.2.${(next += 1)}`;
const email = () => `person-${(next += 1)}@example.test`;

async function fail(count: number, of: { email: string; address: string }, minutesAgo = 0) {
	const at = new Date(Date.now() - minutesAgo * 60_000);
	await db()
		.insert(signInAttempt)
		.values(Array.from({ length: count }, () => ({ ...of, succeeded: false, at })));
}

/** Milliseconds until a try is let through, 0 where it is now. Asking counts as no try. */
async function waitMs(of: { email: string; address: string }): Promise<number> {
	try {
		const id = await throttle.begin(of.email, of.address);
		await db().delete(signInAttempt).where(eq(signInAttempt.id, id));
		return 0;
	} catch (error) {
		return (error as { details: { waitMs: number } }).details.waitMs;
	}
}

const about = (ms: number) => [ms - 2000, ms] as const;
async function expectWait(of: { email: string; address: string }, ms: number) {
	const [least, most] = about(ms);
	const wait = await waitMs(of);
	expect(wait).toBeGreaterThan(least);
	expect(wait).toBeLessThanOrEqual(most);
}

test('five wrong tries are free; then the wait doubles up to 15 minutes', async () => {
	const of = { email: email(), address: address() };
	await fail(4, of);
	expect(await waitMs(of)).toBe(0);
	await fail(5, of);
	await expectWait(of, 16_000);
	await fail(3, of);
	await expectWait(of, 128_000);
	await fail(100, of);
	await expectWait(of, 900_000);
});

test('tries that are refused count for nothing, and old ones are forgotten after an hour', async () => {
	const of = { email: email(), address: address() };
	await fail(20, of, 20);
	expect(await waitMs(of)).toBe(0);
	await fail(20, of);
	const first = await waitMs(of);
	for (let knock = 0; knock < 5; knock++) await waitMs(of);
	expect(await waitMs(of)).toBeLessThanOrEqual(first);
	await db()
		.update(signInAttempt)
		.set({ at: sql`at - interval '61 minutes'` })
		.where(eq(signInAttempt.email, of.email));
	await fail(4, of);
	expect(await waitMs(of)).toBe(0);
});

test('an address that tries many accounts is slowed down, others are not', async () => {
	const from = address();
	for (let index = 0; index < 35; index++) await fail(1, { email: email(), address: from });
	await expectWait({ email: email(), address: from }, 32_000);
	expect(await waitMs({ email: email(), address: address() })).toBe(0);
});

test('nobody can lock a person out: other addresses wait a minute at most, a known one does not wait', async () => {
	const own = { email: email(), address: address() };
	const attempt = await throttle.begin(own.email, own.address);
	await throttle.succeed(db(), attempt);
	for (let index = 0; index < 100; index++) await fail(2, { email: own.email, address: address() });
	expect(await waitMs(own)).toBe(0);
	await expectWait({ email: own.email, address: address() }, 60_000);
});

test('a right password makes the failures before it count no longer', async () => {
	const of = { email: email(), address: address() };
	await fail(4, of);
	await throttle.succeed(db(), await throttle.begin(of.email, of.address));
	await fail(4, of);
	expect(await waitMs(of)).toBe(0);
});

test('tries at the same time count as well: guessing in parallel gains nothing', async () => {
	const person = await givePassword(await makeMember(await makeTeam(), 'engineer'));
	const from = { address: address(), userAgent: null };
	const guess = () => signIn.withPassword({ email: person.email, password: 'not this' }, from);
	const outcomes = await Promise.allSettled(Array.from({ length: 40 }, guess));
	const codes = outcomes.map((one) =>
		one.status === 'rejected' ? (one.reason as { code: string }).code : 'opened',
	);
	expect(codes.filter((code) => code === 'unauthenticated').length).toBeLessThanOrEqual(8);
	expect(codes.filter((code) => code === 'tooMany').length).toBeGreaterThanOrEqual(32);
	expect(codes).not.toContain('opened');
});

test('a right sign-in is written down as one', async () => {
	const person = await givePassword(await makeMember(await makeTeam(), 'engineer'));
	const from = { address: address(), userAgent: null };
	await signIn.withPassword({ email: person.email, password: testPassword }, from);
	const rows = await db()
		.select()
		.from(signInAttempt)
		.where(and(eq(signInAttempt.email, person.email), eq(signInAttempt.address, from.address)));
	expect(rows.map((row) => row.succeeded)).toEqual([true]);
});
