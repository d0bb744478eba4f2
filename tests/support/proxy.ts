import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Socket } from 'node:net';

/** A way to a TCP server that can be cut, mended and led elsewhere. */
export interface Proxy {
	port: number;
	/** Port on the loopback address to which new connections go. */
	target: number;
	/** Breaks every connection and lets no new one in. */
	cut(): void;
	mend(): void;
	close(): Promise<void>;
}

export async function startProxy(target: number): Promise<Proxy> {
	const sockets = new Set<Socket>();
	let isCut = false;
	const server = createServer((near) => {
		if (isCut) {
			near.destroy();
			return;
		}
		const far = connect(proxy.target, '127.0.0.1');
		for (const [from, to] of [
			[near, far],
			[far, near],
		] as const) {
			sockets.add(from);
			from.on('error', () => from.destroy());
			from.on('close', () => {
				sockets.delete(from);
				to.destroy();
			});
			from.pipe(to);
		}
	});
	server.listen(0, '127.0.0.1');
	await once(server, 'listening');
	const cut = () => {
		isCut = true;
		for (const socket of sockets) socket.destroy();
	};
	const proxy: Proxy = {
		target,
		port: (server.address() as AddressInfo).port,
		cut,
		mend: () => {
			isCut = false;
		},
		close: async () => {
			cut();
			server.close();
			await once(server, 'close');
		},
	};
	return proxy;
}
