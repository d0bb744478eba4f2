import { personColour } from '$lib/protocol/person-colour';
import { ownPresence, type Presence } from '$lib/protocol/presence';
import type { Connection } from './connection';
import type { Said } from './incoming';

/** One client of a document as the others see it; null: gone. */
export interface Entry {
	clientId: number;
	clock: number;
	state: Presence | null;
}

interface Seen {
	clock: number;
	state: Presence | null;
	/** Whose it is here; another process has those without. */
	connection?: Connection;
	/** When another process said it last. */
	heardAt?: number;
}

/** After so long without a word of another process, the people there are forgotten. */
const forgottenMs = 15_000;

/**
 * Who is in a room and where, on every process. A connection speaks for one client id only, which nobody else's
 * connection has; its person and name come from the session, whatever the page says.
 */
export class People {
	readonly #seen = new Map<number, Seen>();

	/** Takes what a page says of itself; returns what is new for the others. */
	take(connection: Connection, said: readonly Said[]): Entry[] {
		const own = said.find(({ clientId }) => this.#isOwn(connection, clientId));
		if (!own) return [];
		const { clientId, clock } = own;
		const before = this.#seen.get(clientId);
		if (!before && own.state === null) return [];
		if (before && (clock < before.clock || (clock === before.clock && own.state !== null))) {
			before.connection = connection;
			delete before.heardAt;
			return [];
		}
		const state = own.state === null ? null : describe(connection, own.state);
		this.#seen.set(clientId, { clock, state, connection });
		return [{ clientId, clock, state }];
	}

	/** Takes what another process says; returns what is new for the pages here. */
	hear(entries: readonly Entry[], now = performance.now()): Entry[] {
		return entries.filter(({ clientId, clock, state }) => {
			const before = this.#seen.get(clientId);
			const isNewer = !before || clock > before.clock || (clock === before.clock && state === null);
			// Somebody here has it: what another process still has is from before the page came here.
			if (before?.connection && (state === null || !isNewer)) return false;
			if (state === null) return this.#seen.delete(clientId);
			if (isNewer) this.#seen.set(clientId, { clock, state, heardAt: now });
			else before.heardAt = now;
			return isNewer;
		});
	}

	/** Forgets those of whom another process has said nothing for long; returns them as gone. */
	forget(now = performance.now()): Entry[] {
		const gone = [...this.#seen].filter(
			([, { heardAt }]) => heardAt !== undefined && now - heardAt > forgottenMs,
		);
		return this.#remove(gone);
	}

	/** Who speaks for a client id. */
	personOf(clientId: number): string | undefined {
		const seen = this.#seen.get(clientId);
		return seen?.connection?.actor.personId ?? seen?.state?.user.id;
	}

	/** Everybody, for one who has just come. */
	all(): Entry[] {
		return entriesOf([...this.#seen]);
	}

	/** Those who are connected here. */
	here(): Entry[] {
		return entriesOf([...this.#seen].filter(([, { connection }]) => connection));
	}

	/** Forgets who was on a connection; returns them as gone. */
	leave(connection: Connection): Entry[] {
		return this.#remove([...this.#seen].filter(([, seen]) => seen.connection === connection));
	}

	#remove(gone: readonly [number, Seen][]): Entry[] {
		for (const [clientId] of gone) this.#seen.delete(clientId);
		return gone.map(([clientId, { clock }]) => ({ clientId, clock, state: null }));
	}

	#isOwn(connection: Connection, clientId: number): boolean {
		const holder = this.#seen.get(clientId)?.connection;
		if (holder === connection) return true;
		// A page that comes back before its old socket was found dead keeps its client id.
		const person = this.personOf(clientId);
		if (person !== undefined && person !== connection.actor.personId) return false;
		return ![...this.#seen.values()].some((seen) => seen.connection === connection);
	}
}

function entriesOf(seen: readonly [number, Seen][]): Entry[] {
	return seen.map(([clientId, { clock, state }]) => ({ clientId, clock, state }));
}

function describe(connection: Connection, state: unknown): Presence {
	const { personId: id, name } = connection.actor;
	const color = personColour(id);
	const own = ownPresence.safeParse(state);
	return {
		...(own.success ? own.data : {}),
		user: { id, name, color, colorLight: `${color}33` },
	};
}
