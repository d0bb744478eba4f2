import { AppError } from '$lib/errors';
import { closeDb } from '$lib/server/db/client';
import { demandDurable } from '$lib/server/db/durability';
import { env } from '$lib/server/env';
import { defaultOptions } from '$lib/calc/engine';
import { closePool, evaluateInChild } from '$lib/server/evaluation/pool';
import { log } from '$lib/server/log';
import { closeCode } from '$lib/protocol/closing';
import { createServer, type IncomingMessage, type RequestListener, type Server } from 'node:http';
import { inspect } from 'node:util';
import { signDaily } from './daily';
import { Jobs } from './jobs/jobs';
import { checkNodeOptions, readRoles } from './roles';
import { onSignal } from './shutdown';
import { Rooms } from './sync/rooms';
import { Gate } from './sync/upgrade';

async function start(): Promise<void> {
	checkNodeOptions(process.env.NODE_OPTIONS);
	const { HOST, PORT, ROLES } = env();
	const roles = readRoles(ROLES);
	if (roles.has('sync')) await demandDurable();
	const server = createServer(roles.has('web') ? await webHandler() : noPages);
	const sync = roles.has('sync') ? openSync(server) : undefined;
	const jobs = roles.has('jobs') ? new Jobs() : undefined;
	await jobs?.start();
	await listening(server, PORT, HOST);
	log().info({ host: HOST, port: PORT, roles: [...roles] }, 'listening');

	const endDaily = signDaily();
	let answered: (() => Promise<void>) | undefined;
	const stop = () => {
		endDaily();
		sync?.gate.shut();
		// Whoever comes from now on finds nobody listening, and a proxy in front asks the next process.
		answered = stopListening(server);
		return Promise.resolve();
	};
	// The pages' part is a bundle of its own, with its own pools; it hears of the end by this event.
	const tellPages = () => Promise.resolve(process.emit('sveltekit:shutdown' as 'exit', 0));
	onSignal([
		{ name: 'let nobody in', limitMs: 100, run: stop },
		// What was taken is stored and acknowledged before the pages are asked to come back.
		{ name: 'store what was taken', limitMs: 2500, run: async () => sync?.rooms.drain() },
		{
			name: 'close the sockets',
			limitMs: 500,
			run: () => Promise.resolve(sync?.rooms.close(closeCode.restarting)),
		},
		{ name: 'answer what was asked', limitMs: 1500, run: async () => answered?.() },
		{ name: 'tell the pages', limitMs: 100, run: tellPages },
		{ name: 'stop following the log', limitMs: 500, run: async () => sync?.rooms.stop() },
		{ name: 'stop the jobs', limitMs: 6000, run: async () => jobs?.stop() },
		{ name: 'stop the evaluators', limitMs: 1000, run: closePool },
		{ name: 'leave the database', limitMs: 1000, run: closeDb },
	]);
}

function openSync(server: Server): { rooms: Rooms; gate: Gate } {
	const rooms = new Rooms();
	const gate = new Gate(rooms);
	server.on('upgrade', gate.onUpgrade);
	// The first edit finds its evaluators running.
	evaluateInChild([], defaultOptions).catch((error: unknown) => {
		log().error({ err: error }, 'the evaluators do not start');
	});
	return { rooms, gate };
}

/** The pages, built beside this file. They read ORIGIN, ADDRESS_HEADER and the like when they are imported. */
async function webHandler(): Promise<RequestListener> {
	const address = new URL('./web/handler.js', import.meta.url).href;
	const { handler } = (await import(address)) as { handler: RequestListener };
	return (request, response) => {
		// Of files and of pages made at build time; other pages say more and put their own in place of these.
		response.setHeader('x-content-type-options', 'nosniff');
		response.setHeader('referrer-policy', 'same-origin');
		response.setHeader('content-security-policy', "frame-ancestors 'none'");
		admitMailbox(request);
		handler(request, response);
	};
}

/**
 * A mailbox's own button to stop mail (RFC 8058) posts without an origin, which no page may. The token in the address
 * is all it is believed for, so it counts as ours.
 */
function admitMailbox(request: IncomingMessage): void {
	const isStop = request.method === 'POST' && request.url?.startsWith('/mail/stop?') === true;
	if (isStop) request.headers.origin ??= env().ORIGIN;
}

const noPages: RequestListener = (_, response) => {
	response.writeHead(404, { 'content-type': 'text/plain' }).end('This process serves no pages.\n');
};

function listening(server: Server, port: number, host: string): Promise<void> {
	return new Promise((resolve, reject) => {
		server.once('error', reject);
		server.listen(port, host, () => {
			server.off('error', reject);
			resolve();
		});
	});
}

/** Stops listening; what it returns waits for the requests under way, some of them no longer than 750 ms. */
function stopListening(server: Server): () => Promise<void> {
	const stopped = new Promise<void>((resolve) => server.close(() => resolve()));
	return () => {
		server.closeIdleConnections();
		setTimeout(() => server.closeAllConnections(), 750).unref();
		return stopped;
	};
}

start().catch((error: unknown) => {
	process.stderr.write(error instanceof AppError ? `${error.message}\n` : `${inspect(error)}\n`);
	process.exit(1);
});
