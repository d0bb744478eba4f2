import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Socket } from 'node:net';

/** What becomes of the notifications that PostgreSQL sends. */
type Fate = 'pass' | 'drop' | 'mangle';

/** A way to PostgreSQL that loses notifications, or delays, doubles and reorders them; all else passes. */
export interface HintProxy {
	port: number;
	fate: Fate;
	/** Notifications that came by. */
	count: number;
	close(): Promise<void>;
}

/** Type byte of a NotificationResponse. */
const notification = 'A'.charCodeAt(0);

export async function startHintProxy(target: number): Promise<HintProxy> {
	const sockets = new Set<Socket>();
	// As the database's own sockets: small messages held back until the last was confirmed would look like a slow database.
	const server = createServer({ noDelay: true }, (near) => {
		const far = connect({ port: target, host: '127.0.0.1', noDelay: true });
		for (const [one, other] of [
			[near, far],
			[far, near],
		] as const) {
			sockets.add(one);
			one.on('error', () => one.destroy());
			one.on('close', () => {
				sockets.delete(one);
				other.destroy();
			});
		}
		near.pipe(far);
		const held: Buffer[] = [];
		let rest: Buffer = Buffer.alloc(0);
		far.on('data', (chunk: Buffer) => {
			const { messages, rest: left } = split(Buffer.concat([rest, chunk]));
			rest = left;
			for (const message of messages) {
				if (message[0] !== notification || proxy.fate === 'pass') near.write(message);
				else if (proxy.fate === 'mangle') held.push(message);
				proxy.count += message[0] === notification ? 1 : 0;
			}
			// Three at a time, the last first, and each twice.
			if (held.length >= 3)
				for (const late of held.splice(0).reverse()) near.write(Buffer.concat([late, late]));
		});
	});
	server.listen(0, '127.0.0.1');
	await once(server, 'listening');
	const proxy: HintProxy = {
		port: (server.address() as AddressInfo).port,
		fate: 'pass',
		count: 0,
		close: async () => {
			for (const socket of sockets) socket.destroy();
			server.close();
			await once(server, 'close');
		},
	};
	return proxy;
}

/** Whole messages of the server's side of the protocol: a type byte and a length that counts itself. */
function split(bytes: Buffer): { messages: Buffer[]; rest: Buffer } {
	const messages: Buffer[] = [];
	let at = 0;
	while (bytes.length - at >= 5) {
		const end = at + 1 + bytes.readUInt32BE(at + 1);
		if (end > bytes.length) break;
		messages.push(bytes.subarray(at, end));
		at = end;
	}
	return { messages, rest: bytes.subarray(at) };
}
