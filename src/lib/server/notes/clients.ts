import { AppError } from '$lib/errors';
import { and, eq, inArray } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { noteClient } from '../db/schema/notes';
import type { Edit } from './updates';

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

/**
 * Gives the client ids of edits to their authors, under the note's lock. Throws AppError `conflict` where one belongs
 * to somebody else; `details.ids` are the edits that say so.
 */
export async function claim(
	connection: Connection,
	{ noteId, epoch }: { noteId: string; epoch: string },
	edits: readonly Edit[],
): Promise<void> {
	const key = (clientId: number) => `${epoch}/${clientId}`;
	const strange = new Set(
		edits.flatMap(({ clients }) => clients).filter((id) => !found.has(key(id))),
	);
	const owners = strange.size > 0 ? await ownersOf(connection, noteId, [...strange]) : new Map();
	remember(key, owners);
	const claimed = new Map<number, string>();
	const ids = edits
		.filter(({ clients, personId }) =>
			clients.some((id) => {
				const owner = found.get(key(id)) ?? claimed.get(id);
				if (owner === undefined) claimed.set(id, personId);
				return owner !== undefined && owner !== personId;
			}),
		)
		.map(({ id }) => id);
	if (ids.length > 0) {
		throw new AppError('conflict', 'An edit was written under the client id of somebody else.', {
			details: { ids },
		});
	}
	if (claimed.size === 0) return;
	await connection
		.insert(noteClient)
		.values([...claimed].map(([clientId, personId]) => ({ noteId, clientId, personId })));
}

async function ownersOf(
	connection: Connection,
	noteId: string,
	ids: number[],
): Promise<Map<number, string>> {
	const rows = await connection
		.select({ clientId: noteClient.clientId, personId: noteClient.personId })
		.from(noteClient)
		.where(and(eq(noteClient.noteId, noteId), inArray(noteClient.clientId, ids)));
	return new Map(rows.map(({ clientId, personId }) => [clientId, personId]));
}

function remember(key: (clientId: number) => string, owners: ReadonlyMap<number, string>): void {
	if (found.size + owners.size > mostFound) found.clear();
	for (const [clientId, personId] of owners) found.set(key(clientId), personId);
}
