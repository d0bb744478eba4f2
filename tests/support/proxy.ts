import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Socket } from 'node:net';

/** A way to a TCP server that can be cut, mended and led elsewhere. */
export interface Proxy {
	port: number;
	/** Port on the loopback address to which new connections go. */
	target: number;
	/** How many connections were let in so far. */
	readonly connections: number;
	/** Bytes a second from the server to each client; no bound unless set. */
	bytesPerSecond: number | undefined;
	/** Breaks every connection and lets no new one in. */
	cut(): void;
	mend(): void;
	close(): Promise<void>;
}

export async function startProxy(target: number): Promise<Proxy> {
	const sockets = new Set<Socket>();
	let isCut = false;
	let connections = 0;
	const server = createServer((near) => {
		if (isCut) {
			near.destroy();
			return;
		}
		connections += 1;
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
			if (from === far && proxy.bytesPerSecond) throttle(from, to, proxy.bytesPerSecond);
			else from.pipe(to);
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
		bytesPerSecond: undefined,
		get connections() {
			return connections;
		},
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

/** Passes bytes on at a rate; what does not fit stays where it comes from, as on a slow line. */
function throttle(from: Socket, to: Socket, bytesPerSecond: number): void {
	const stepMs = 20;
	const clock = setInterval(() => {
		const step = Math.ceil((bytesPerSecond * stepMs) / 1000);
		const chunk = (from.read(Math.min(step, from.readableLength)) ?? undefined) as
			Buffer | undefined;
		if (chunk) to.write(chunk);
	}, stepMs);
	from.on('readable', () => undefined);
	from.on('close', () => clearInterval(clock));
	from.on('end', () => to.end());
}
