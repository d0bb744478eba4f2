import { rmSync, writeFileSync } from 'node:fs';
import { build } from './build.mjs';
import { createDatabase, dropDatabase } from './databases.mjs';
import { fill } from './demonstration-database.mjs';
import { alone } from './lock.mjs';
import { openMailSink } from './mail-sink.mjs';
import { inData } from './place.mjs';
import { start } from './postgres.mjs';
import { report } from './problem.mjs';
import { checkpointFolder, endEarlier, serve } from './serving.mjs';

/** Serves the production entry with the demonstration in a database of its own until it is told to end. */
const port = Number(process.argv[2]);
const database = `test_${process.pid}_browser`;

/** @type {import('./serving.mjs').Serving | undefined} */
let serving;
/** @type {import('./mail-sink.mjs').MailSink | undefined} */
let sink;
let ending = false;

async function finish() {
	if (ending) return;
	ending = true;
	await serving?.stop();
	await sink?.close();
	await dropDatabase(database);
	rmSync(checkpointFolder(database), { recursive: true, force: true });
	process.exit();
}

process.on('SIGTERM', () => void finish());
process.on('SIGINT', () => void finish());

try {
	await endEarlier('browser', { onlyOrphans: true });
	await alone('demo', build);
	await start();
	await createDatabase(database);
	await fill(database);
	sink = await openMailSink({ firstPort: port + 400 });
	writeFileSync(inData('browser-mail.json'), JSON.stringify({ pageUrl: sink.pageUrl }));
	const more = { SMTP_URL: sink.smtpUrl, MAIL_FROM: 'Halfdigit <notes@alderfen.example>' };
	serving = await serve({
		database,
		port,
		kind: 'browser',
		log: inData('browser-tests.log'),
		more,
	});
	await serving.ended;
} catch (error) {
	report(error);
	process.exitCode = 1;
}
await finish();
