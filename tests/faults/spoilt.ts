import type { Random } from './random';
import type { Link, Spoiler } from './wire';

const commit = Buffer.from('commit\0');
const insert = Buffer.from('insert into "note_update"');
const listen = Buffer.from('listen ');

/** A whole message of PostgreSQL's protocol that asks one plain question. */
function question(text: string): Buffer {
	const bytes = Buffer.from(`Q....${text}\0`);
	bytes.writeInt32BE(bytes.length - 1, 1);
	return bytes;
}

/** What can be done to a process's connections to PostgreSQL by who reads along. */
export class Spoilt {
	readonly #random: Random;
	/** Times that something was done. */
	done = 0;
	/** Times that something is still to be done. */
	left = Infinity;

	constructor(random: Random) {
		this.#random = random;
	}

	/** Lets connections fall silent on which somebody begins to listen. */
	readonly deafen: Spoiler = (link, bytes, toServer) => {
		if (!toServer || !bytes.includes(listen)) return bytes;
		this.done += 1;
		link.notes.add('listening');
		// The answer still comes back, so that the process believes that it hears.
		link.far.once('data', () => setImmediate(() => (link.silent = true)));
		return bytes;
	};

	/** Cuts connections while edits are committed on them. */
	readonly cutCommits: Spoiler = (link, bytes, toServer) => {
		if (!toServer) {
			if (!link.notes.has('answer to cut')) return bytes;
			// It is committed, and nobody is told.
			link.cut();
			return undefined;
		}
		if (!this.#commitsEdits(link, bytes) || this.left === 0) return bytes;
		this.left -= 1;
		this.done += 1;
		const where = this.#random.below(5);
		if (where === 0) {
			link.cut();
			return undefined;
		}
		if (where < 3) {
			link.far.end(bytes);
			link.near.destroy();
			return undefined;
		}
		link.notes.add('answer to cut');
		return bytes;
	};

	/** Lies: edits are rolled back where they were to be committed, and the process believes that they are stored. */
	readonly forgetCommits: Spoiler = (link, bytes, toServer) => {
		if (!toServer || !this.#commitsEdits(link, bytes) || this.left === 0) return bytes;
		this.left -= 1;
		this.done += 1;
		return question('rollback');
	};

	#commitsEdits(link: Link, bytes: Buffer): boolean {
		if (bytes.includes(insert)) link.notes.add('edits');
		return bytes.includes(commit) && link.notes.delete('edits');
	}
}
