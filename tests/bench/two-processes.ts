import { once } from 'node:events';
import { eq } from 'drizzle-orm';
import { WebSocket } from 'ws';
import { hashOf } from '$lib/server/auth/tokens';
import { db } from '$lib/server/db/client';
import { session } from '$lib/server/db/schema/people';
import { env } from '$lib/server/env';
import { startHintProxy } from '../support/hint-proxy';
import { startSyncServer } from '../support/server';
import { Crowd, type Seat } from './crowd';
import { quantile, row, type Row } from './row';

/** Seats of two people on each of so many new notes. */
type MakeSeats = (notes: number) => Promise<Seat[][]>;

/** What crosses from one process to another, with the database's notifications and without any. */
export async function processRows(
	makeSeats: MakeSeats,
	makeVisitor: () => Promise<string>,
): Promise<Row[]> {
	const hints = await startHintProxy(Number(new URL(env().DATABASE_URL).port));
	const address = new URL(env().DATABASE_URL);
	address.port = String(hints.port);
	const settings = { DATABASE_URL: address.href };
	const [first, second] = [await startSyncServer(settings), await startSyncServer(settings)];
	try {
		const across = async (seconds = 8) => {
			const notes = (await makeSeats(10)).map((seats) =>
				seats.map((seat, place) => ({
					...seat,
					url: moved(seat.url, place ? second.url : first.url),
				})),
			);
			const crowd = new Crowd({ notes, editsPerSecond: 2, seconds });
			await crowd.open();
			const { text } = await crowd.type();
			await crowd.close();
			return quantile(text, 0.95);
		};
		// The processes have just begun, and their evaluators with them.
		await across(3);
		const told = await across();
		hints.fate = 'drop';
		const untold = await across();
		return [
			row({
				id: 'sync.across-processes',
				what: 'a key to the text of somebody on another process, p95',
				value: told,
				unit: 'ms',
				target: 150,
			}),
			row({
				id: 'sync.across-processes-untold',
				what: 'the same with every notification of the database lost',
				value: untold,
				unit: 'ms',
				target: 2000,
			}),
			await revokedRow(await makeSeats(10), second.url, makeVisitor),
		];
	} finally {
		await Promise.all([first.stop(), second.stop()]);
		await hints.close();
	}
}

const moved = (url: string, to: string) => `${to}/${url.split('/').at(-1) ?? ''}`;

/** From the end of a session to its closed socket, on a process that no notification reaches. */
async function revokedRow(
	notes: Seat[][],
	url: string,
	makeVisitor: () => Promise<string>,
): Promise<Row> {
	const sample: number[] = [];
	for (const [seat] of notes) {
		if (!seat) continue;
		const cookie = await makeVisitor();
		const socket = new WebSocket(moved(seat.url, url), { headers: { ...seat.headers, cookie } });
		await once(socket, 'message');
		const token = cookie.split('=').at(-1) ?? '';
		const closed = once(socket, 'close');
		const from = performance.now();
		await db()
			.delete(session)
			.where(eq(session.sessionToken, hashOf(token)));
		await closed;
		sample.push(performance.now() - from);
	}
	return row({
		id: 'sync.revoked-to-closed',
		what: `from the end of a session to its closed socket, the slowest of ${sample.length}, no notification heard`,
		value: Math.max(...sample),
		unit: 'ms',
		target: 2000,
	});
}
