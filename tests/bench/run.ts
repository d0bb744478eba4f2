import { eq } from 'drizzle-orm';
import { listQuery } from '$lib/schemas/notes';
import type { Actor } from '$lib/server/auth/access';
import { closeDb, db } from '$lib/server/db/client';
import { membership, person, team } from '$lib/server/db/schema/people';
import * as listing from '$lib/server/notes/listing';
import * as notes from '$lib/server/notes/notes';
import { createDatabase, dropDatabase } from '../../server/local/databases.mjs';
import { fill } from '../../server/local/demonstration-database.mjs';
import { inData } from '../../server/local/place.mjs';
import { firstFree } from '../../server/local/ports.mjs';
import { endEarlier, serve, settings } from '../../server/local/serving.mjs';
import { keep } from '../support/table';
import { arrivalRows } from './arrival';
import { openBrowser, signIn } from './browser';
import { comparisonRows } from './comparison';
import { engineRows } from './engine';
import { loadRows } from './load';
import { pageRows } from './pages';
import { table, type Row } from './row';
import { setupRows } from './setup';
import { signingRows } from './signing';
import { sixtyLines } from './sixty-lines';
import { syncRows } from './sync';
import { trialRows } from './trials';
import { longCell, longNote, typingRows } from './typing';

/** Areas named on the command line; all of them when none is named. */
const wanted = process.argv.slice(2);
const rows: Row[] = [];

if (wants('engine')) rows.push(...engineRows(), ...(await trialRows()));
if (wants('page') || wants('sync')) rows.push(...(await servedRows()));
if (wants('load')) rows.push(...(await loadRows()));
if (wants('signing')) rows.push(...(await signingRows()));
if (wants('comparison')) rows.push(...(await comparisonRows()));
if (wants('setup')) rows.push(...(await setupRows()));

keep('bench.json', rows);
process.stdout.write(`\n${table(rows)}\n`);
if (!rows.every((row) => row.ok)) process.exitCode = 1;

function wants(area: string): boolean {
	return wanted.length === 0 || wanted.includes(area);
}

async function servedRows(): Promise<Row[]> {
	await endEarlier('bench', { onlyOrphans: true });
	const database = `test_${process.pid}_bench`;
	const port = await firstFree(4273);
	await createDatabase(database);
	const { accounts } = await fill(database);
	const serving = await serve({ database, port, kind: 'bench', log: inData('bench.log') });
	const browser = await openBrowser();
	try {
		Object.assign(process.env, settings(database, port));
		const [writer, watcher] = accounts.filter((account) => account.role === 'engineer');
		if (!writer || !watcher) throw new Error('the demonstration has no two engineers');
		const { number } = await notes.create(await actorOf(writer.email), {
			title: 'Sixty worked lines',
			cells: sixtyLines,
		});
		const writing = await signIn(browser, serving.url, writer);
		const watching = await signIn(browser, serving.url, watcher);
		const path = `/notes/${number}`;
		return [
			...(wants('page') ? await rowsOfPages() : []),
			...(wants('sync') ? await syncRows(writing, watching, path) : []),
		];

		async function rowsOfPages(): Promise<Row[]> {
			const actor = await actorOf(writer!.email);
			const pathOf = async (title: string, cells: Parameters<typeof notes.create>[1]['cells']) =>
				`/notes/${(await notes.create(actor, { title, cells })).number}`;
			const long = {
				longNote: await pathOf('Two thousand lines', longNote),
				longCell: await pathOf('Three hundred lines in one cell', longCell),
			};
			return [
				...(await pageRows(watching, path, await frozenPath(writer!.email))),
				...(await arrivalRows(watching, path)),
				...(await typingRows(browser, writing, long)),
			];
		}
	} finally {
		await browser.close();
		await serving.stop();
		await closeDb();
		await dropDatabase(database);
	}
}

async function actorOf(email: string): Promise<Actor> {
	const [found] = await db()
		.select({
			personId: person.id,
			name: person.name,
			email: person.email,
			teamId: team.id,
			teamName: team.name,
			role: membership.role,
		})
		.from(person)
		.innerJoin(membership, eq(membership.personId, person.id))
		.innerJoin(team, eq(team.id, membership.teamId))
		.where(eq(person.email, email));
	if (!found) throw new Error(`${email} is not in a team`);
	return found;
}

/** The page of some frozen revision of the demonstration. */
async function frozenPath(email: string): Promise<string> {
	const rows = await listing.list(await actorOf(email), listQuery.parse({}));
	const frozen = rows.find((one) => one.revision);
	if (!frozen?.revision) throw new Error('the demonstration has no frozen revision');
	return `/notes/${frozen.number}/revisions/${frozen.revision}`;
}
