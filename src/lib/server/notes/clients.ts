import { eq, sql } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { noteClient } from '../db/schema/notes';
import type { Edit } from './append';

/** Claims that were found in the database, by epoch and client id. They never change, so that hot notes need not ask again. */
const found = new Map<string, string>();
const mostFound = 50_000;

/** Whose the client ids of a note's document are. */
export async function read(connection: Connection, noteId: string): Promise<Map<number, string>> {
	const rows = await connection
		.select({ clientId: noteClient.clientId, personId: noteClient.personId })
		.from(noteClient)
		.where(eq(noteClient.noteId, noteId));
	return new Map(rows.map(({ clientId, personId }) => [clientId, personId]));
}

/** Edits of a note whose row is locked, and the life of its document. */
interface Claiming {
	noteId: string;
	epoch: string;
	edits: readonly Edit[];
}

/** A client id that becomes a person's. */
export interface Claim {
	noteId: string;
	clientId: number;
	personId: string;
}

/**
 * What client ids edits claim for their authors, under the locks of the notes. `wrong` are the edits, by note, under a
 * client id that belongs to somebody else.
 */
export async function claimsOf(
	connection: Connection,
	notes: readonly Claiming[],
): Promise<{ claims: Claim[]; wrong: Map<string, string[]> }> {
	const strange = notes.flatMap(({ noteId, epoch, edits }) =>
		[...new Set(edits.flatMap(({ clients }) => clients))]
			.filter((id) => !found.has(key(epoch, id)))
			.map((clientId) => ({ note_id: noteId, client_id: clientId })),
	);
	if (strange.length > 0) remember(notes, await ownersOf(connection, strange));
	const claims: Claim[] = [];
	const wrong = new Map<string, string[]>();
	for (const { noteId, epoch, edits } of notes) {
		const claimed = new Map<number, string>();
		for (const { id, clients, personId } of edits) {
			const isWrong = clients.some((clientId) => {
				const owner = found.get(key(epoch, clientId)) ?? claimed.get(clientId);
				if (owner === undefined) claimed.set(clientId, personId);
				return owner !== undefined && owner !== personId;
			});
			if (isWrong) wrong.set(noteId, [...(wrong.get(noteId) ?? []), id]);
		}
		if (wrong.has(noteId)) continue;
		for (const [clientId, personId] of claimed) claims.push({ noteId, clientId, personId });
	}
	return { claims, wrong };
}

function key(epoch: string, clientId: number): string {
	return `${epoch}/${clientId}`;
}

async function ownersOf(
	connection: Connection,
	asked: readonly { note_id: string; client_id: number }[],
): Promise<Claim[]> {
	const { rows } = await connection.execute<{ note: string; client: string; person: string }>(sql`
		select known.note_id as note, known.client_id as client, known.person_id as person
		from jsonb_to_recordset(${JSON.stringify(asked)}::jsonb) as asked (note_id uuid, client_id bigint)
		join note_client known using (note_id, client_id)`);
	return rows.map(({ note, client, person }) => ({
		noteId: note,
		clientId: Number(client),
		personId: person,
	}));
}

function remember(notes: readonly Claiming[], owners: readonly Claim[]): void {
	if (found.size + owners.length > mostFound) found.clear();
	const epochs = new Map(notes.map(({ noteId, epoch }) => [noteId, epoch]));
	for (const { noteId, clientId, personId } of owners) {
		found.set(key(epochs.get(noteId) ?? '', clientId), personId);
	}
}
