import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { Actor } from '$lib/server/auth/access';
import { db } from '$lib/server/db/client';
import { mail } from '$lib/server/db/schema/mail';
import { tell } from '$lib/server/mail/outbox';
import { openMailSink, type MailSink } from '../../server/local/mail-sink.mjs';
import { createDatabase, type TestDatabase } from '../support/database';
import { eventually } from '../support/page';
import { makeMember, makeTeam } from '../support/people';
import { startSyncServer } from '../support/server';

let database: TestDatabase;
let sink: MailSink;
let reader: Actor;
/** What the mail server waits for before it takes a mail. */
let beforeTaking: () => Promise<void> = () => Promise.resolve();
beforeAll(async () => {
	database = await createDatabase();
	sink = await openMailSink({ firstPort: 4773, onMail: () => beforeTaking() });
	reader = await makeMember(await makeTeam(), 'engineer');
});
afterAll(async () => {
	await sink.close();
	await database.drop();
});

const startJobs = () =>
	startSyncServer({ ROLES: 'jobs', SMTP_URL: sink.smtpUrl, MAIL_FROM: 'notes@example.test' });

async function write(key: string): Promise<void> {
	await tell(db(), [reader.personId], {
		teamId: reader.teamId,
		key,
		said: {
			what: 'frozen',
			number: 'MN-001',
			title: key,
			letter: 'A',
			by: 'Robin Example',
			words: '',
			due: null,
			path: '/notes/MN-001/revisions/A',
		},
	});
}

const stateOf = async (key: string) =>
	(await db().select({ state: mail.state }).from(mail).where(eq(mail.key, key)))[0]?.state;
const got = (key: string) => sink.mails.filter(({ text }) => text.includes(key)).length;

test('mail goes out by itself, also what was written while nothing ran; two processes send none twice', async () => {
	await write('written before');
	const servers = await Promise.all([startJobs(), startJobs()]);
	await eventually(async () => (await stateOf('written before')) === 'sent');
	for (let count = 0; count < 10; count += 1) await write(`mail ${count} of ten`);
	await eventually(async () => (await stateOf('mail 9 of ten')) === 'sent');
	await eventually(() => sink.mails.length === 11);
	for (const server of servers) expect(await server.stop()).toBe(0);
	expect(sink.mails).toHaveLength(11);
	expect(got('written before')).toBe(1);
}, 60_000);

test('a process killed in the middle of a mail: it is not sent again, and administrators see it', async () => {
	let arrived: () => void = () => undefined;
	const underWay = new Promise<void>((resolve) => (arrived = resolve));
	let release: () => void = () => undefined;
	beforeTaking = () => {
		arrived();
		return new Promise<void>((resolve) => (release = resolve));
	};
	const server = await startJobs();
	await write('cut off');
	await underWay;
	await server.stop('SIGKILL');
	release();
	beforeTaking = () => Promise.resolve();
	await eventually(() => got('cut off') === 1);

	const next = await startJobs();
	await write('after it');
	await eventually(async () => (await stateOf('after it')) === 'sent');
	expect(await stateOf('cut off')).toBe('sending');
	const longAgo = new Date(Date.now() - 10 * 60_000);
	await db().update(mail).set({ sendingAt: longAgo }).where(eq(mail.key, 'cut off'));
	await eventually(async () => (await stateOf('cut off')) === 'unknown');
	expect(got('cut off')).toBe(1);
	expect(await next.stop()).toBe(0);
}, 60_000);
