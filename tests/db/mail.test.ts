import { eq, sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, expect, test } from 'vitest';
import { mailKinds, type MailChoice } from '$lib/schemas/mail';
import { placedCells } from '$lib/note/document';
import * as threads from '$lib/server/comments/threads';
import { db } from '$lib/server/db/client';
import { mail } from '$lib/server/db/schema/mail';
import { env } from '$lib/server/env';
import { closePool } from '$lib/server/evaluation/pool';
import * as desk from '$lib/server/desk/desk';
import * as daily from '$lib/server/mail/daily';
import * as delivery from '$lib/server/mail/delivery';
import * as preferences from '$lib/server/mail/preferences';
import * as unsent from '$lib/server/mail/unsent';
import * as notes from '$lib/server/notes/notes';
import { loadDocument } from '$lib/server/notes/updates';
import * as candidates from '$lib/server/revisions/candidates';
import { remind } from '$lib/server/revisions/reminders';
import { withdraw } from '$lib/server/revisions/withdraw';
import { openMailSink, type MailSink } from '../../server/local/mail-sink.mjs';
import { createDatabase, type TestDatabase } from '../support/database';
import { check, proposal, seen, writeNote } from '../support/note-life';
import { makeCast, testPassword as password, type Cast } from '../support/people';

let database: TestDatabase;
let sink: MailSink;
let cast: Cast;
beforeAll(async () => {
	database = await createDatabase();
	sink = await openMailSink({ firstPort: 4673 });
	Object.assign(env(), { SMTP_URL: sink.smtpUrl, MAIL_FROM: 'Halfdigit <notes@example.test>' });
	cast = await makeCast();
});
afterEach(async () => {
	sink.mails.length = 0;
	Object.assign(env(), { SMTP_URL: sink.smtpUrl });
	await db().delete(mail);
	for (const actor of Object.values(cast)) await preferences.set(actor, allAtOnce);
});
afterAll(async () => {
	await sink.close();
	await closePool();
	await database.drop();
});

const allAtOnce = Object.fromEntries(mailKinds.map((kind) => [kind, 'at once'])) as MailChoice;

/** Hands over all that waits; gives addressees and subjects in the order of the addresses. */
async function post(): Promise<string[]> {
	for (const id of await delivery.takeWaiting()) await delivery.deliver(id);
	const posted = sink.mails.map(({ to, subject }) => `${nameIn(to)}: ${subject}`).sort();
	sink.mails.length = 0;
	return posted;
}

const nameIn = (to: string) => /^"?([^"<]+?)"?\s*</.exec(to)?.[1] ?? to;
const statesOf = async () =>
	(await db().select({ state: mail.state }).from(mail)).map(({ state }) => state).sort();

async function askAll(title: string, due = '') {
	const note = await writeNote(cast.author, title);
	const asked = { checkers: [cast.engineer.personId], approver: cast.approver.personId, due };
	await candidates.propose(cast.author, note.number, proposal(asked));
	return note;
}

test('each step of a candidate is told to those it concerns, once, and not to who did it', async () => {
	const { number } = await askAll('Weir');
	expect(await post()).toEqual([`Engineer Example: ${number}: candidate A waits for your check`]);
	await candidates.sendBack(cast.engineer, number, {
		...(await seen(cast.engineer, number)),
		reason: 'The load is missing.',
	});
	expect(await post()).toEqual([`Author Example: ${number}: candidate A was returned`]);
	await candidates.propose(
		cast.author,
		number,
		proposal({ checkers: [cast.engineer.personId], approver: cast.approver.personId }),
	);
	await post();
	await check(cast, number);
	expect(await post()).toEqual([
		`Approver Example: ${number}: candidate A waits for your approval`,
	]);
	const open = await seen(cast.approver, number);
	await candidates.approve(cast.approver, number, open);
	expect(await post()).toEqual([
		`Author Example: ${number}: revision A is frozen`,
		`Engineer Example: ${number}: revision A is frozen`,
	]);
	const { digest } = await revisionOf(number);
	const reason = 'A part is not made any more.';
	await withdraw(cast.second, number, 'A', { password, digest, reason });
	expect(await post()).toEqual([
		`Approver Example: ${number}: revision A was withdrawn`,
		`Author Example: ${number}: revision A was withdrawn`,
		`Engineer Example: ${number}: revision A was withdrawn`,
	]);
	expect(await post()).toEqual([]);
});

async function revisionOf(number: string): Promise<{ digest: string }> {
	const { rows } = await db().execute<{ digest: string }>(sql`
		select r.digest from revision r join candidate c on c.id = r.candidate_id
		where c.details->'note'->>'number' = ${number}`);
	return rows[0]!;
}

test('a mail says the same as text and as HTML, escapes what people wrote, and carries the headers to stop it', async () => {
	const note = await writeNote(cast.author, 'Level <b>& flow</b>');
	const purpose = 'Board "2" <script>alert(1)</script>';
	const asked = { checkers: [cast.engineer.personId], due: '2026-12-24', purpose };
	await candidates.propose(cast.author, note.number, proposal(asked));
	for (const id of await delivery.takeWaiting()) await delivery.deliver(id);
	const [got] = sink.mails;
	expect(got?.text).toContain(
		`Author Example asks you to check candidate A of ${note.number}, Level <b>& flow</b>.`,
	);
	expect(got?.text).toContain(purpose);
	expect(got?.text).toContain('An answer is wanted by 24 Dec 2026.');
	expect(got?.text).toContain(`${env().ORIGIN}/notes/${note.number}/candidate`);
	expect(got?.html).toContain('Board &quot;2&quot; &lt;script&gt;alert(1)&lt;/script&gt;');
	expect(got?.html).not.toContain('<script>');
	expect(got?.from).toContain('notes@example.test');
	const header = (name: string) => got?.headers.find((line) => line.toLowerCase().startsWith(name));
	expect(header('list-unsubscribe-post')).toContain('List-Unsubscribe=One-Click');
	const stop =
		/\/mail\/stop\?token=([^>\s]+)/.exec(
			header('list-unsubscribe:')?.replace(/\s/g, '') ?? '',
		)?.[1] ?? '';
	expect(preferences.stoppable(decodeURIComponent(stop))).toBe('requests');
	expect(header('message-id')).toMatch(/<[0-9a-f-]{36}@example\.test>/);
});

test('people choose mail at once, once a day or never; the token of a mail stops that kind and nothing else', async () => {
	await preferences.set(cast.engineer, { ...allAtOnce, requests: 'once a day' });
	const one = await askAll('One');
	const two = await askAll('Two');
	expect(await post()).toEqual([]);
	const morning = new Date('2026-11-02T05:30:00Z');
	await daily.gather(morning);
	await daily.gather(morning);
	for (const id of await delivery.takeWaiting()) await delivery.deliver(id);
	expect(sink.mails.map(({ subject }) => subject)).toEqual(['Halfdigit: 2 things since yesterday']);
	const [letter] = sink.mails;
	for (const { number } of [one, two]) expect(letter?.text).toContain(`/notes/${number}/candidate`);
	sink.mails.length = 0;

	const token = /mail\/stop\?token=(\S+)/.exec(letter?.text ?? '')?.[1] ?? '';
	expect(preferences.stoppable(`${token}x`)).toBeUndefined();
	expect(await preferences.stop(`${token}x`)).toBeUndefined();
	expect(await preferences.stop(decodeURIComponent(token))).toBe('daily');
	expect(await preferences.get(cast.engineer)).toEqual({ ...allAtOnce, requests: 'never' });
	await askAll('Three');
	await daily.gather(new Date('2026-11-03T05:30:00Z'));
	expect(await post()).toEqual([]);
});

test('those who were asked are reminded the day before and the day after, while they have not signed', async () => {
	const { number } = await askAll('Due', '2026-12-18');
	await post();
	for (const day of ['2026-12-16', '2026-12-18', '2026-12-20'])
		await remind(new Date(`${day}T05:30:00Z`));
	expect(await post()).toEqual([]);
	const before = new Date('2026-12-17T05:30:00Z');
	await remind(before);
	await remind(before);
	expect(await post()).toEqual([`Engineer Example: ${number}: candidate A still waits for you`]);
	await check(cast, number);
	await post();
	await remind(new Date('2026-12-19T05:30:00Z'));
	expect(await post()).toEqual([`Approver Example: ${number}: candidate A still waits for you`]);
	await candidates.approve(cast.approver, number, await seen(cast.approver, number));
	await remind(new Date('2026-12-19T06:30:00Z'));
	expect((await post()).filter((line) => line.includes('still waits'))).toEqual([]);
});

test('a mail that cannot go waits for another try; one that is refused, or given up, is shown to administrators', async () => {
	Object.assign(env(), { SMTP_URL: 'smtp://127.0.0.1:9' });
	await askAll('No server');
	const [id] = await delivery.takeWaiting();
	await expect(delivery.deliver(id!)).rejects.toThrow('ECONNREFUSED');
	expect(await statesOf()).toEqual(['waiting']);
	const { unsent: waiting } = await unsent.list(cast.administrator);
	expect(waiting).toMatchObject([{ state: 'waiting', tries: 1, name: 'Engineer Example' }]);
	await delivery.giveUp(id!);
	expect((await unsent.list(cast.administrator)).unsent).toMatchObject([{ state: 'failed' }]);

	Object.assign(env(), { SMTP_URL: sink.smtpUrl });
	await unsent.again(cast.administrator, id!);
	expect(await post()).toHaveLength(1);
	expect((await unsent.list(cast.administrator)).unsent).toEqual([]);
	await expect(unsent.again(cast.administrator, id!)).rejects.toMatchObject({ code: 'conflict' });
	await expect(unsent.list(cast.engineer)).rejects.toMatchObject({ code: 'forbidden' });
	const others = await makeCast('Another bench');
	expect((await unsent.list(others.administrator)).unsent).toEqual([]);
});

test('no mail goes twice: not by two jobs at once, and not after the program ended in the middle of one', async () => {
	await askAll('Twice');
	const [id] = await delivery.takeWaiting();
	await Promise.all([delivery.deliver(id!), delivery.deliver(id!), delivery.deliver(id!)]);
	expect(sink.mails).toHaveLength(1);

	const second = await askAll('Broken off');
	const [broken] = await delivery.takeWaiting();
	// As a process leaves it that ends after the server took the mail and before it wrote that down.
	await delivery.deliver(broken!);
	await db().update(mail).set({ state: 'sending', sentAt: null }).where(eq(mail.id, broken!));
	await delivery.settleBroken();
	expect(await statesOf()).toEqual(['sending', 'sent']);
	await delivery.settleBroken(new Date(Date.now() + 5 * 60_000));
	await delivery.deliver(broken!);
	expect(await delivery.takeWaiting()).toEqual([]);
	expect(sink.mails).toHaveLength(2);
	const { unsent: shown } = await unsent.list(cast.administrator);
	expect(shown).toMatchObject([{ id: broken, state: 'unknown' }]);
	expect(shown[0]?.subject).toContain(second.number);
	await unsent.drop(cast.administrator, broken!);
	expect((await unsent.list(cast.administrator)).unsent).toEqual([]);
});

test('a connection that breaks while a mail is handed over leaves it to people', async () => {
	const { createServer } = await import('node:net');
	const hangsUp = createServer((socket) => {
		socket.write('220 here\r\n');
		socket.on('data', (data: Buffer) => {
			const line = data.toString();
			if (line.startsWith('DATA')) socket.write('354 go on\r\n');
			else if (line.includes('\r\n.\r\n')) socket.destroy();
			else if (/^(EHLO|MAIL|RCPT)/.test(line)) socket.write('250 good\r\n');
		});
		socket.on('error', () => undefined);
	});
	await new Promise<void>((resolve) => hangsUp.listen(0, '127.0.0.1', resolve));
	const address = hangsUp.address();
	const port = typeof address === 'object' && address ? address.port : 0;
	Object.assign(env(), { SMTP_URL: `smtp://127.0.0.1:${port}` });
	await askAll('Cut');
	const [id] = await delivery.takeWaiting();
	await delivery.deliver(id!);
	expect(await statesOf()).toEqual(['unknown']);
	hangsUp.close();
});

test('who is named in a comment is told, but not who wrote it', async () => {
	const { number } = await writeNote(cast.author, 'Named');
	const [cell] = await cellIds(number);
	await threads.open(cast.engineer, number, {
		cellId: cell!,
		kind: 'question',
		blocking: false,
		body: `@${cast.author.name}, @${cast.engineer.name}: which part is it?`,
	});
	for (const id of await delivery.takeWaiting()) await delivery.deliver(id);
	expect(sink.mails.map(({ to, subject }) => `${nameIn(to)}: ${subject}`)).toEqual([
		`Author Example: ${number}: Engineer Example mentions you`,
	]);
	expect(sink.mails[0]?.text).toContain('@Author Example, @Engineer Example: which part is it?');
	expect(sink.mails[0]?.text).toContain(`/notes/${number}#cell-${cell}`);
	const shelves = await desk.read(cast.author);
	expect(shelves.find(({ name }) => name === 'mentions')?.items).toMatchObject([{ number }]);
	const own = await desk.read(cast.engineer);
	expect(own.find(({ name }) => name === 'mentions')?.items).toEqual([]);
});

async function cellIds(number: string): Promise<string[]> {
	const { id } = await notes.get(cast.author, number);
	return placedCells((await loadDocument(id)).doc).map((cell) => cell.id);
}
