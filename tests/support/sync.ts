import type { Actor } from '$lib/server/auth/access';
import * as notes from '$lib/server/notes/notes';
import pg from 'pg';
import { createDatabase } from './database';
import { eventually, openPage } from './page';
import { makeMember, makeTeam, signIn } from './people';
import { startSyncServer, type SyncServer } from './server';

/** A database, a running sync server and a signed-in engineer. */
export interface SyncBench {
	databaseUrl: string;
	server: SyncServer;
	engineer: Actor;
	cookie: string;
	/** Makes a note of the engineer's with one calculation cell, and returns its id. */
	makeNote(source?: string): Promise<string>;
	/** Runs a statement as the owner of the tables, who may do what the application must not. */
	asOwner(statement: string): Promise<void>;
	/** Waits until the server's evaluators have started. */
	computes(): Promise<void>;
	close(): Promise<void>;
}

export async function startSyncBench(): Promise<SyncBench> {
	const database = await createDatabase();
	const engineer = await makeMember(await makeTeam(), 'engineer');
	const server = await startSyncServer();
	const cookie = await signIn(engineer);
	const makeNote = async (source = 'U = 5 V\n') => {
		const cells = [{ kind: 'calculation' as const, source }];
		return (await notes.create(engineer, { title: 'Divider', cells })).id;
	};
	return {
		databaseUrl: database.url,
		server,
		engineer,
		cookie,
		makeNote,
		asOwner: async (statement) => {
			const client = new pg.Client({ connectionString: database.ownerUrl });
			await client.connect();
			await client.query(statement);
			await client.end();
		},
		computes: async () => {
			const page = await openPage(server, { noteId: await makeNote(), cookie });
			await eventually(() => page.evaluation.quantities.U, 60_000);
			page.destroy();
		},
		close: async () => {
			await server.stop();
			await database.drop();
		},
	};
}
