import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import type { Random } from './random';

/** One connection through a wire. */
export class Link {
	readonly near: Socket;
	readonly far: Socket;
	/** Nothing gets through any more, and neither side is told. */
	silent = false;
	/** What a spoiler wants to remember of it. */
	readonly notes = new Set<string>();
	#late: Promise<void> = Promise.resolve();
	#waiting = 0;

	constructor(near: Socket, far: Socket) {
		this.near = near;
		this.far = far;
	}

	/** Breaks it on both sides. */
	cut(): void {
		this.near.destroy();
		this.far.destroy();
	}

	/** Hands bytes on, in order, when they are due. */
	pass(to: Socket, bytes: Buffer, due: Promise<void> | undefined): void {
		if (due) this.#waiting += 1;
		if (this.#waiting === 0) {
			to.write(bytes);
			return;
		}
		if (!due) this.#waiting += 1;
		this.#late = this.#late
			.then(() => due)
			.then(() => {
				this.#waiting -= 1;
				if (!to.destroyed) to.write(bytes);
			});
	}
}

/** Looks at what a client sends, or is sent, before it goes on; returns what is to go on instead. */
export type Spoiler = (link: Link, bytes: Buffer, toServer: boolean) => Buffer | undefined;

/** A way to a TCP server on which everything that happens to connections can be made to happen. */
export class Wire {
	readonly target: number;
	readonly links = new Set<Link>();
	/** Lets no new connection in. */
	refuses = false;
	/** Connections open, but nothing gets through. */
	isSilent = false;
	delayMs = 0;
	spoil: Spoiler | undefined;
	readonly #server: Server;
	readonly #late = new Set<() => void>();

	private constructor(target: number) {
		this.target = target;
		this.#server = createServer((near) => this.#take(near));
	}

	static async open(target: number): Promise<Wire> {
		const wire = new Wire(target);
		wire.#server.listen(0, '127.0.0.1');
		await once(wire.#server, 'listening');
		return wire;
	}

	get port(): number {
		return (this.#server.address() as AddressInfo).port;
	}

	/** Breaks every connection and lets no new one in. */
	cut(): void {
		this.refuses = true;
		for (const link of this.links) link.cut();
	}

	/** Breaks some of the connections; tells how many. */
	cutSome(random: Random, share: number): number {
		const chosen = [...this.links].filter(() => random.chance(share));
		for (const link of chosen) link.cut();
		return chosen.length;
	}

	/** Lets some of the connections fall silent; tells how many. */
	silenceSome(random: Random, share: number): number {
		const chosen = [...this.links].filter((link) => !link.silent && random.chance(share));
		for (const link of chosen) link.silent = true;
		return chosen.length;
	}

	/** Everything works again, and what was late arrives. Connections that fell silent are broken, as by a router that has forgotten them. */
	mend(): void {
		this.refuses = false;
		this.isSilent = false;
		this.delayMs = 0;
		this.spoil = undefined;
		for (const arrive of this.#late) arrive();
		for (const link of this.links) if (link.silent) link.cut();
	}

	async close(): Promise<void> {
		this.cut();
		this.#server.close();
		await once(this.#server, 'close');
	}

	#take(near: Socket): void {
		if (this.refuses) {
			near.destroy();
			return;
		}
		const link = new Link(near, connect(this.target, '127.0.0.1'));
		link.silent = this.isSilent;
		this.links.add(link);
		for (const [from, to, toServer] of [
			[link.near, link.far, true],
			[link.far, link.near, false],
		] as const) {
			from.setNoDelay(true);
			from.on('error', () => from.destroy());
			from.on('close', () => {
				if (!link.silent) to.destroy();
				if (to.destroyed) this.links.delete(link);
			});
			from.on('data', (bytes) => {
				if (link.silent || to.destroyed) return;
				const passing = this.spoil ? this.spoil(link, bytes, toServer) : bytes;
				if (passing) link.pass(to, passing, this.delayMs > 0 ? this.#due() : undefined);
			});
		}
	}

	/** Comes after the delay, or when the wire is mended. */
	#due(): Promise<void> {
		return new Promise((resolve) => {
			const arrive = () => {
				clearTimeout(timer);
				this.#late.delete(arrive);
				resolve();
			};
			const timer = setTimeout(arrive, this.delayMs);
			this.#late.add(arrive);
		});
	}
}
