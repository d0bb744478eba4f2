import type { MonteCarlo, Quantity } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import { demand, type Actor } from '../auth/access';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import { seedOf } from '../evaluation/seed';
import * as store from '../evaluation/store';
import * as notes from '../notes/notes';
import { find } from './quantities';

interface Wish {
	quantity: string;
	adaptive: boolean;
}

interface Circumstances {
	onProgress: (drawn: number, total: number) => void;
	/** Stops the trials. */
	signal: AbortSignal;
}

type Drawn = Quantity & { monteCarlo: MonteCarlo };

/** By person. */
const underWay = new Map<string, { run: Promise<Drawn>; signal: AbortSignal }>();

/**
 * Gets trials of a quantity of the working copy ready; what it returns draws them. One run at a time for each person.
 * Throws AppError `notFound`, `invalid` for an exact quantity, `tooMany` while another run goes on.
 */
export async function prepare(
	actor: Actor,
	number: string,
	{ quantity: name, adaptive }: Wish,
): Promise<(circumstances: Circumstances) => Promise<Drawn>> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const { content, results } = await store.current(id);
	const { standardUncertainty, needsMonteCarlo } = find(results.quantities, name);
	if (standardUncertainty === undefined && !needsMonteCarlo)
		throw new AppError('invalid', `\`${name}\` is exact; there is nothing to draw.`);
	await expectFree(actor);
	return async ({ onProgress, signal }) => {
		await expectFree(actor);
		const options = {
			...optionsOf(content),
			monteCarlo: { quantities: [name], adaptive, seed: seedOf(id) },
		};
		const run = evaluateInChild(content.cells, options, { onProgress, signal }).then(
			({ quantities }) => drawn(quantities, name),
		);
		underWay.set(actor.personId, { run, signal });
		try {
			return await run;
		} finally {
			underWay.delete(actor.personId);
		}
	};
}

/** A run that was stopped a moment ago is waited for. */
async function expectFree({ personId }: Actor): Promise<void> {
	const before = underWay.get(personId);
	if (!before) return;
	if (!before.signal.aborted)
		throw new AppError('tooMany', 'Trials of yours are being drawn already. Stop them first.');
	await before.run.catch(() => undefined);
}

function drawn(quantities: Record<string, Quantity>, name: string): Drawn {
	const { monteCarlo, ...quantity } = find(quantities, name);
	if (!monteCarlo) throw new AppError('unavailable', 'No trials could be drawn.');
	return { ...quantity, monteCarlo };
}
