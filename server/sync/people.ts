import { personColour } from '$lib/protocol/person-colour';
import { ownPresence, type Presence } from '$lib/protocol/presence';
import type { Connection } from './connection';
import type { Said } from './incoming';
import * as outgoing from './outgoing';

interface Seen {
	clock: number;
	state: Presence | null;
	connection: Connection;
}

/**
 * Who is in a room and where. A connection speaks for one client id only, which nobody else's connection
 * has; its person and name come from the session, whatever the page says.
 */
export class People {
	readonly #seen = new Map<number, Seen>();

	/** Takes what a page says of itself; returns the message for the others, if it changes anything. */
	take(connection: Connection, said: readonly Said[]): Uint8Array | undefined {
		const own = said.find(({ clientId }) => this.#isOwn(connection, clientId));
		if (!own) return undefined;
		const { clientId, clock } = own;
		const before = this.#seen.get(clientId);
		if (!before && own.state === null) return undefined;
		if (before && (clock < before.clock || (clock === before.clock && own.state !== null))) {
			before.connection = connection;
			return undefined;
		}
		const state = own.state === null ? null : this.#describe(connection, own.state);
		this.#seen.set(clientId, { clock, state, connection });
		return outgoing.presence([{ clientId, clock, state }]);
	}

	/** Who speaks for a client id. */
	personOf(clientId: number): string | undefined {
		return this.#seen.get(clientId)?.connection.actor.personId;
	}

	/** Everybody, for one who has just come. */
	all(): Uint8Array {
		return outgoing.presence(
			[...this.#seen].map(([clientId, { clock, state }]) => ({ clientId, clock, state })),
		);
	}

	/** Forgets who was on a connection; returns the message for the others. */
	leave(connection: Connection): Uint8Array | undefined {
		const gone = [...this.#seen].filter(([, seen]) => seen.connection === connection);
		for (const [clientId] of gone) this.#seen.delete(clientId);
		if (gone.length === 0) return undefined;
		return outgoing.presence(
			gone.map(([clientId, { clock }]) => ({ clientId, clock, state: null })),
		);
	}

	#isOwn(connection: Connection, clientId: number): boolean {
		const holder = this.#seen.get(clientId)?.connection;
		if (holder === connection) return true;
		// A page that comes back before its old socket was found dead keeps its client id.
		if (holder && holder.actor.personId !== connection.actor.personId) return false;
		return ![...this.#seen.values()].some((seen) => seen.connection === connection);
	}

	#describe(connection: Connection, state: unknown): Presence {
		const { personId: id, name } = connection.actor;
		const color = personColour(id);
		const own = ownPresence.safeParse(state);
		return {
			...(own.success ? own.data : {}),
			user: { id, name, color, colorLight: `${color}33` },
		};
	}
}
