import { fork } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import type { NoteCell } from '$lib/note/document';
import * as notes from '$lib/server/notes/notes';
import { env } from '$lib/server/env';
import type { Actor } from '$lib/server/auth/access';
import { createDatabase } from '../support/database';
import { makeMember, makeTeam, signIn } from '../support/people';
import { startSyncServer, type SyncServer } from '../support/server';
import { sixtyLines } from './sixty-lines';
import { Crowd, type Heard, type Seat, type Session } from './crowd';
import { memoryRow, openingRow, resident } from './opening';
import { quantile, row, type Row } from './row';
import { storeRows } from './store';
import { processRows } from './two-processes';

/** Many editors at once on one process of the production entry, with clients and database on the same cores. */
export async function loadRows(): Promise<Row[]> {
	const database = await createDatabase();
	process.env.EVALUATORS = '2';
	const server = await startSyncServer();
	const relay = await startRelay();
	const place = await Place.make(server);
	try {
		return [
			await memoryRow(server, await place.seats(200, 1, sixtyLines)),
			...(await oneNote(place, relay.url)),
			...(await figures(place)),
			...(await durable(place)),
			residentRow(server),
			...(await manyEditors(place)),
			...(await processRows(
				(count) => place.seats(count, 2, prose),
				() => place.visitor(),
			)),
			...(await storeRows({ author: place.author, makeNote: () => place.note(prose) })),
			await openingRow((await place.seats(1, 1, sixtyLines))[0]![0]!, place.author),
		];
	} finally {
		relay.stop();
		await server.stop();
		await database.drop();
	}
}

type Content = Omit<NoteCell, 'id'>[];

/** A server with people who may write. */
class Place {
	private constructor(
		private readonly server: SyncServer,
		private readonly people: { actor: Actor; cookie: string }[],
	) {}

	static async make(server: SyncServer): Promise<Place> {
		const team = await makeTeam();
		const people: { actor: Actor; cookie: string }[] = [];
		for (let count = 0; count < 100; count++) {
			const actor = await makeMember(team, 'engineer');
			people.push({ actor, cookie: await signIn(actor) });
		}
		return new Place(server, people);
	}

	/** Who makes the notes. */
	get author(): string {
		return this.people[0]!.actor.personId;
	}

	/** The cookie of one of them who signs in once more. */
	visitor(): Promise<string> {
		return signIn(this.people[0]!.actor);
	}

	/** The id of a new note. */
	async note(cells: Content): Promise<string> {
		return (await notes.create(this.people[0]!.actor, { title: 'Load', cells })).id;
	}

	/** Seats of so many people on each of so many new notes. */
	async seats(noteCount: number, each: number, cells: Content): Promise<Seat[][]> {
		const made: Seat[][] = [];
		for (let count = 0; count < noteCount; count++) {
			const id = await this.note(cells);
			made.push(
				Array.from({ length: each }, (_, place) => ({
					url: `${this.server.url}/${id}`,
					headers: {
						origin: env().ORIGIN,
						cookie: this.people[(count * each + place) % this.people.length]!.cookie,
					},
				})),
			);
		}
		return made;
	}
}

const prose: Content = [{ kind: 'text', source: 'A note that many write in. ' }];

async function hear(session: Session): Promise<Heard> {
	const crowd = new Crowd(session);
	await crowd.open();
	const heard = await crowd.type();
	await crowd.close();
	return heard;
}

/** 20 editors on one note, against the bare relay; the two take turns, so that both meet the same machine. */
async function oneNote(place: Place, relayUrl: string): Promise<Row[]> {
	const pace = { editsPerSecond: 4, seconds: 6 };
	const [ours, theirs]: [number[], number[]] = [[], []];
	for (let turn = 0; turn < 3; turn++) {
		const room = Array.from({ length: 20 }, () => ({ url: `${relayUrl}/${turn}`, headers: {} }));
		const relayed = await hear({ ...pace, notes: [room], relay: true });
		theirs.push(...relayed.text);
		ours.push(...(await hear({ ...pace, notes: await place.seats(1, 20, prose) })).text);
	}
	return [
		row({
			id: 'sync.text-20-editors',
			what: 'a key to the text of the others, p95, 20 editors on one note; peer: bare relay in memory',
			value: quantile(ours, 0.95),
			unit: 'ms',
			peer: quantile(theirs, 0.95),
			most: 1.5,
		}),
	];
}

/** 10 editors on a note of 200 worked lines: each changes an input that all later lines depend on. */
async function figures(place: Place): Promise<Row[]> {
	const inputs = Array.from({ length: 10 }, (_, i) => `a_${i} = 1000 V`);
	const lines = Array.from({ length: 190 }, (_, i) => {
		const before = i === 0 ? inputs.map((_, k) => `a_${k}`).join(' + ') : `b_${i - 1}`;
		return `b_${i} = (${before}) * 47 kohm / (47 kohm + 120 ohm)`;
	});
	const source = [...inputs, ...lines, ''].join('\n');
	const seats = await place.seats(1, 10, [{ kind: 'calculation', source }]);
	const heard = await hear({ notes: seats, editsPerSecond: 1, seconds: 15, figures: true });
	return [
		row({
			id: 'sync.figure-200-lines',
			what: 'a key to the new figure everywhere, p95, 200 worked lines, 10 editors',
			value: quantile(heard.figure, 0.95),
			unit: 'ms',
			target: 60,
		}),
	];
}

/** From an edit to its acknowledgement, which comes after the commit. */
async function durable(place: Place): Promise<Row[]> {
	const crowds = [
		{ name: '50-on-10', notes: 10, each: 5, most: [5, 20, 80] },
		{ name: '50-on-1', notes: 1, each: 50, most: [15, 35, 80] },
		{ name: '200-on-40', notes: 40, each: 5, most: [undefined, 100, undefined] },
	];
	const rows: Row[] = [];
	for (const { name, notes: count, each, most } of crowds) {
		const seats = await place.seats(count, each, prose);
		const heard = await hear({ notes: seats, editsPerSecond: 5, seconds: 8 });
		for (const [index, percent] of [50, 95, 99].entries()) {
			rows.push(
				row({
					id: `sync.saved-${name}-p${percent}`,
					what: `an edit to its acknowledgement, p${percent}, ${count * each} editors on ${count} notes, 5 a second each`,
					value: quantile(heard.saved, percent / 100),
					unit: 'ms',
					...(most[index] !== undefined && { target: most[index] }),
				}),
			);
		}
		rows.push(lost(name, heard));
		if (name !== '50-on-10') continue;
		rows.push(
			row({
				id: 'sync.bytes-per-key',
				what: 'bytes to the server for one typed letter, its id among them',
				value: heard.bytesSent / heard.edits,
				unit: 'B',
				target: 60,
			}),
		);
	}
	return rows;
}

/** What the process holds after 200 people wrote in 40 notes, and evaluators apart. */
function residentRow(server: SyncServer): Row {
	return row({
		id: 'sync.memory-200-on-40',
		what: 'resident memory of the process when 200 people have written in 40 notes',
		value: resident(server.pid),
		unit: 'MB',
		target: 300,
	});
}

/** 1,000 editors at once. */
async function manyEditors(place: Place): Promise<Row[]> {
	const source = 'U = 5 V\nR_1 = 10 kohm\nR_2 = 4.7 kohm\nU_out = U * R_2 / (R_1 + R_2)\n# ';
	const seats = await place.seats(200, 5, [{ kind: 'calculation', source }]);
	const heard = await hear({ notes: seats, editsPerSecond: 2, seconds: 15, warmSeconds: 5 });
	return [
		row({
			id: 'sync.text-1000-editors',
			what: 'a key to the text of the others, p95, 200 notes × 5 editors, 2 keys a second each',
			value: quantile(heard.text, 0.95),
			unit: 'ms',
			target: 150,
		}),
		row({
			id: 'sync.saved-1000-editors',
			what: 'the same, a key to its acknowledgement, p95',
			value: quantile(heard.saved, 0.95),
			unit: 'ms',
		}),
		lost('1000-editors', heard),
	];
}

function lost(name: string, { unacknowledged, edits }: Heard): Row {
	return row({
		id: `sync.lost-${name}`,
		what: `edits without an acknowledgement, of ${edits}`,
		value: unacknowledged,
		unit: 'edits',
		target: 0,
	});
}

async function startRelay(): Promise<{ url: string; stop: () => void }> {
	const child = fork(fileURLToPath(new URL('relay.ts', import.meta.url)), [], {
		stdio: ['ignore', 'pipe', 'inherit', 'ipc'],
	});
	const [port] = (await once(child.stdout!, 'data')) as [Buffer];
	return { url: `ws://127.0.0.1:${Number(port.toString())}`, stop: () => child.disconnect() };
}
