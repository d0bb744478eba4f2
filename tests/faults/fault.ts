import { judge, type Verdict } from './judge';
import type { Told } from './row';
import { isClean, Stage, type Size } from './stage';
import type { Site } from './site';

/** Something that goes wrong, and what it is done to. */
export interface Fault {
	id: string;
	/** For the table. */
	fault: string;
	notes?: number;
	writers?: number;
	/** The same for the short form, where it is another. */
	fewer?: Size;
	/** Runs, each with notes of its own, in the long form. */
	runs?: number;
	/** Breaks and mends, counting in `stage.injected`; afterwards everything is whole. */
	run: (stage: Stage) => Promise<void>;
}

export interface Outcome extends Told {
	/** Everything that was wrong, sentences. */
	wrong: string[];
}

/** Runs a fault and judges what is left. */
export async function runFault(
	site: Site,
	{ id, fault, notes = 2, writers = 8, fewer, runs = 1, run }: Fault,
	{ isFull, seed }: { isFull: boolean; seed: number },
): Promise<Outcome> {
	const from = performance.now();
	const row = { id, fault, injected: 0, acknowledged: 0 };
	const found = { lost: 0, doubled: 0, phantom: 0, diverged: 0 };
	const wrong = new Set<string>();
	const size = isFull || !fewer ? { notes, writers } : fewer;
	let slowestMs = 0;
	for (let n = 0; n < (isFull ? runs : 1); n++) {
		const stage = await Stage.open(site, isFull, seed + n, size);
		try {
			await run(stage);
			for (const evidence of await stage.evidence()) {
				const verdict = judge(evidence);
				for (const kind of kinds) found[kind] += verdict[kind].length;
				if (!isClean(verdict)) wrong.add(told(verdict));
			}
		} catch (error) {
			stage.complain(String(error instanceof Error ? error.stack : error));
		} finally {
			await stage.rest();
			stage.destroy();
			await site.mend();
		}
		row.injected += stage.injected;
		row.acknowledged += stage.acknowledged;
		slowestMs = Math.max(slowestMs, stage.slowestMs);
		stage.complaints.forEach((sentence) => wrong.add(sentence));
	}
	if (row.injected === 0) wrong.add('nothing was broken');
	if (row.acknowledged === 0) wrong.add('nothing was acknowledged');
	return {
		row: { ...row, ...found, ok: wrong.size === 0 },
		recoverySeconds: slowestMs / 1000,
		seconds: (performance.now() - from) / 1000,
		wrong: [...wrong],
	};
}

const kinds = ['lost', 'doubled', 'phantom', 'diverged'] as const;

function told(verdict: Verdict): string {
	return kinds
		.filter((kind) => verdict[kind].length > 0)
		.map((kind) => `${kind}: ${verdict[kind].slice(0, 5).join(' | ')}`)
		.join('; ');
}
