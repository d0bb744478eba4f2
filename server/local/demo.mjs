import { readFileSync, rmSync, writeFileSync } from 'node:fs';
import { endCommands } from './commands.mjs';
import { ensure } from './demonstration-database.mjs';
import { alone } from './lock.mjs';
import { inData } from './place.mjs';
import { isFree } from './ports.mjs';
import { release } from './postgres.mjs';
import { Problem, report } from './problem.mjs';
import { seconds, step } from './progress.mjs';
import { endEarlier, serve } from './serving.mjs';
import { setUp } from './set-up.mjs';

/** @typedef {import('./serving.mjs').Serving} Serving */
/** @typedef {import('./demonstration-database.mjs').Demonstration} Demonstration */

const database = 'halfdigit';
const addressFile = inData('demo.json');
const fresh = process.argv.includes('--fresh');

/** @type {Serving | undefined} */
let serving;
/** @type {import('./mail-sink.mjs').MailSink | undefined} */
let sink;
let ending = false;

async function finish() {
	if (ending) return;
	ending = true;
	endCommands();
	rmSync(addressFile, { force: true });
	await serving?.stop();
	await sink?.close();
	await release();
	process.exit();
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
	process.on(signal, () => {
		process.stdout.write('\nStopping.\n');
		void finish();
	});
}

try {
	await alone('demo', prepare);
	await serving?.ended;
	if (!ending) process.stdout.write('The server ended.\n');
} catch (error) {
	if (!ending) {
		report(error);
		process.exitCode = 1;
	}
}
await finish();

async function prepare() {
	const from = performance.now();
	const port = chosenPort();
	const earlier = await endEarlier('demo');
	if (earlier > 0)
		process.stdout.write('An earlier start of this clone still ran and was ended.\n');
	if (!(await isFree(port))) {
		throw new Problem(
			`Port ${port} is taken by another program.\nChoose another one: PORT=${port + 1} npm run demo`,
		);
	}
	const earlierToken = tokenInFile();
	rmSync(addressFile, { force: true });
	await setUp(['postgresql']);
	/** @type {Demonstration} */
	let demonstration = { accounts: [], token: '' };
	await step('Database and demonstration', async () => {
		demonstration = await ensure(database, { fresh, earlierToken });
	});
	await step('Server', async () => {
		// Its packages are there only now.
		const { openMailSink } = await import('./mail-sink.mjs');
		sink = await openMailSink({ firstPort: port + 400 });
		const more = { SMTP_URL: sink.smtpUrl, MAIL_FROM: 'Halfdigit <notes@alderfen.example>' };
		serving = await serve({ database, port, kind: 'demo', log: inData('server.log'), more });
	});
	announce(`http://localhost:${port}`, demonstration, performance.now() - from, sink?.pageUrl);
}

/**
 * @param {string} url
 * @param {Demonstration} demonstration
 * @param {number} tookMs
 * @param {string} [mailUrl]
 */
function announce(url, { accounts, token }, tookMs, mailUrl) {
	writeFileSync(addressFile, `${JSON.stringify({ url, accounts, token }, null, '\t')}\n`);
	const rows = accounts.map(({ role, email, password }) =>
		['', role.padEnd(14), email.padEnd(34), password].join('  '),
	);
	process.stdout.write(
		`\nHalfdigit runs on ${url} (ready after ${seconds(tookMs)}). Sign in as:\n${rows.join('\n')}\nMail to them is shown on ${mailUrl}.\nCtrl-C stops it.\n`,
	);
}

/** The token of an earlier start that had no time to remove its file. */
function tokenInFile() {
	try {
		const { token } = JSON.parse(readFileSync(addressFile, 'utf8'));
		return typeof token === 'string' ? token : undefined;
	} catch {
		return undefined;
	}
}

function chosenPort() {
	const text = process.env.PORT || '4173';
	const port = Number(text);
	if (!Number.isInteger(port) || port < 1 || port > 65535) {
		throw new Problem(`PORT must be a number from 1 to 65535, not "${text}".`);
	}
	return port;
}
