import { AppError } from '$lib/errors';
import { append, appendAll, type Appended, type Batch } from '$lib/server/notes/append';

interface Waiting extends Batch {
	take: (appended: Appended) => void;
	fail: (error: unknown) => void;
}

const most = { edits: 500, bytes: 4 * 1024 * 1024 };
/** Transactions at once: while one commits, another gathers. */
const mostRunning = 2;

/**
 * Brings the edits of all notes of this process into the database: whatever gathers while transactions run makes the
 * next one, so that many notes share a commit.
 */
class Writer {
	#waiting: Waiting[] = [];
	#running = 0;

	/** Stores edits of a note as `append` does. A note has one call at a time. */
	append(noteId: string, edits: Batch['edits']): Promise<Appended> {
		return new Promise((take, fail) => {
			this.#waiting.push({ noteId, edits, take, fail });
			if (this.#running < mostRunning) void this.#run();
		});
	}

	async #run(): Promise<void> {
		this.#running += 1;
		// One turn later, so that edits that came together go together.
		await new Promise((resolve) => setImmediate(resolve));
		for (let group = this.#next(); group.length > 0; group = this.#next()) await store(group);
		this.#running -= 1;
	}

	#next(): Waiting[] {
		let edits = 0;
		let bytes = 0;
		const end = this.#waiting.findIndex((one) => {
			edits += one.edits.length;
			for (const edit of one.edits) bytes += edit.bytes.length;
			return edits > most.edits || bytes > most.bytes;
		});
		return this.#waiting.splice(0, end < 0 ? this.#waiting.length : Math.max(1, end));
	}
}

async function store(group: readonly Waiting[]): Promise<void> {
	const [first] = group;
	if (group.length === 1 && first) return alone(first);
	try {
		const outcomes = await appendAll(group);
		for (const one of group) {
			const outcome = outcomes.get(one.noteId);
			if (outcome instanceof AppError) one.fail(outcome);
			else if (outcome) one.take(outcome);
			// Locked by somebody, or gone: the others need not wait until that is known.
			else void alone(one);
		}
	} catch {
		// What is wrong with one must not keep the others out.
		for (const one of group) void alone(one);
	}
}

async function alone({ noteId, edits, take, fail }: Waiting): Promise<void> {
	try {
		take(await append(noteId, edits));
	} catch (error) {
		fail(error);
	}
}

/** The process's writer. */
export const writer = new Writer();
