import { AppError } from '$lib/errors';

interface Bounds {
	/** Who asks, as a sentence begins: "Your scripts". */
	who: string;
	/** Requests under way at the same time. */
	atOnce: number;
	/** Requests without a pause between them. */
	burst: number;
	/** Requests in the long run. */
	perSecond: number;
}

interface Use {
	left: number;
	at: number;
	underWay: number;
}

/** How fast each person may ask one process. `now` is in milliseconds and never runs backwards. */
export class Pace {
	readonly #bounds: Bounds;
	readonly #now: () => number;
	readonly #uses = new Map<string, Use>();

	constructor(bounds: Bounds, now = () => performance.now()) {
		this.#bounds = bounds;
		this.#now = now;
	}

	/** People who asked a short while ago. */
	get size(): number {
		return this.#uses.size;
	}

	/** Does the work unless the person asks too fast; throws AppError `tooMany`, with the time to wait, then. */
	async run<T>(personId: string, work: () => Promise<T>): Promise<T> {
		const use = this.#useOf(personId);
		const { who, atOnce, perSecond } = this.#bounds;
		if (use.underWay >= atOnce) throw tooMany(who, `more than ${atOnce} at the same time`, 1000);
		if (use.left < 1) {
			throw tooMany(who, `more than ${perSecond} a second`, ((1 - use.left) / perSecond) * 1000);
		}
		use.left -= 1;
		use.underWay += 1;
		try {
			return await work();
		} finally {
			use.underWay -= 1;
		}
	}

	#useOf(personId: string): Use {
		const { burst, perSecond } = this.#bounds;
		const now = this.#now();
		for (const [id, use] of this.#uses) {
			use.left = Math.min(burst, use.left + ((now - use.at) / 1000) * perSecond);
			use.at = now;
			if (use.left >= burst && use.underWay === 0) this.#uses.delete(id);
		}
		const use = this.#uses.get(personId) ?? { left: burst, at: now, underWay: 0 };
		this.#uses.set(personId, use);
		return use;
	}
}

function tooMany(who: string, what: string, waitMs: number): AppError {
	const seconds = Math.max(1, Math.ceil(waitMs / 1000));
	const wait = seconds === 1 ? 'a second' : `${seconds} seconds`;
	return new AppError('tooMany', `${who} ask ${what}. Wait ${wait}, then try again.`, {
		details: { waitMs },
	});
}
