import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';
import { closeCode, closeSentence } from '$lib/protocol/closing';
import type { Role } from '$lib/schemas/role';
import type { Actor } from '$lib/server/auth/access';
import * as sessions from '$lib/server/auth/sessions';
import { hashOf } from '$lib/server/auth/tokens';
import { db } from '$lib/server/db/client';
import { note } from '$lib/server/db/schema/notes';
import { membership, session } from '$lib/server/db/schema/people';
import { startHintProxy, type HintProxy } from '../support/hint-proxy';
import { connectPage, eventually, openPage } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { startProxy } from '../support/proxy';
import { startSyncServer, syncUrl, type SyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
/** A process that never hears a hint. */
let deaf: SyncServer;
let hints: HintProxy;
beforeAll(async () => {
	bench = await startSyncBench();
	const address = new URL(bench.databaseUrl);
	hints = await startHintProxy(Number(address.port));
	hints.fate = 'drop';
	address.port = String(hints.port);
	deaf = await startSyncServer({ DATABASE_URL: address.href });
});
afterAll(async () => {
	await deaf.stop();
	await hints.close();
	await bench.close();
});

interface Case {
	actor: Actor;
	token: string;
	noteId: string;
}

const roleOf = (actor: Actor, role: Role) =>
	db().update(membership).set({ role }).where(eq(membership.personId, actor.personId));
const sessionOf = (token: string) => eq(session.sessionToken, hashOf(token));

/** What ends a person's right, and the code their sockets are closed with; none where they are only lowered. */
const causes: [string, (one: Case) => PromiseLike<unknown>, number | undefined][] = [
	['the session was ended', ({ token }) => db().delete(session).where(sessionOf(token)), 4401],
	['all sessions were ended', ({ actor }) => sessions.endAll(actor), closeCode.signedOut],
	[
		'the session was idle too long',
		({ token }) =>
			db()
				.update(session)
				.set({ expires: new Date(0) })
				.where(sessionOf(token)),
		closeCode.signedOut,
	],
	[
		'the session is too old',
		({ token }) =>
			db()
				.update(session)
				.set({ endsAt: new Date(0) })
				.where(sessionOf(token)),
		closeCode.signedOut,
	],
	[
		'the membership was withdrawn',
		({ actor: { personId, teamId } }) =>
			db()
				.delete(membership)
				.where(and(eq(membership.personId, personId), eq(membership.teamId, teamId))),
		closeCode.signedOut,
	],
	['the role is that of a reader now', ({ actor }) => roleOf(actor, 'reader'), closeCode.forbidden],
	['the role is one that may not write', ({ actor }) => roleOf(actor, 'administrator'), undefined],
	[
		'the note was restored',
		({ noteId }) =>
			db().update(note).set({ epoch: crypto.randomUUID() }).where(eq(note.id, noteId)),
		closeCode.otherEpoch,
	],
];

/** A page behind a proxy that counts how often it connects. */
async function pageOn(server: SyncServer, one: Case & { cookie: string }) {
	const proxy = await startProxy(server.port);
	const page = await openPage({ url: syncUrl(proxy.port) }, one);
	return { page, proxy };
}

/** Longest time in ms that this process was late itself, while `work` ran. */
async function latenessDuring(work: () => Promise<void>): Promise<number> {
	let last = performance.now();
	let worst = 0;
	const watch = setInterval(() => {
		const now = performance.now();
		worst = Math.max(worst, now - last - 20);
		last = now;
	}, 20);
	await work();
	clearInterval(watch);
	return worst;
}

const isOver = (page: WorkingCopy, code: number | undefined) =>
	code === undefined ? !page.mayWrite : page.connection === 'closed';

test.each(causes)(
	'where %s, the pages on every process are closed or lowered within 2 s, and none comes back',
	async (_, apply, code) => {
		const actor = await makeMember(bench.engineer, 'engineer');
		const cookie = await signIn(actor);
		const one = { actor, cookie, token: cookie.split('=')[1]!, noteId: await bench.makeNote() };
		const pages = await Promise.all([pageOn(bench.server, one), pageOn(deaf, one)]);
		expect(pages.every(({ page }) => page.editable)).toBe(true);
		await apply(one);
		const start = performance.now();
		const lateness = await latenessDuring(() =>
			eventually(() => pages.every(({ page }) => isOver(page, code))),
		);
		expect(performance.now() - start).toBeLessThan(2000 + lateness);
		for (const { page } of pages) {
			expect(page.editable).toBe(false);
			if (code !== undefined) expect(page.notice).toBe(closeSentence(code));
		}
		// In the time in which another page comes in, none of these has tried again.
		const probe = await connectPage(bench.server, { noteId: one.noteId, cookie: bench.cookie });
		await eventually(() => probe.ready);
		expect(pages.map(({ proxy }) => proxy.connections)).toEqual([1, 1]);
		probe.destroy();
		for (const { page, proxy } of pages) {
			page.destroy();
			await proxy.close();
		}
	},
);
