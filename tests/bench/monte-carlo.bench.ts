/**
 * Trials of the divider channel with twelve inputs, beside the same model vectorised in NumPy, taking turns. Prints one
 * line of JSON: milliseconds (the least of the rounds) and their ratio. Run with tsx; python3 and python3-numpy are
 * needed for the other side, `reference` is null without them.
 */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { simulate } from '$lib/calc/doubt/monte-carlo';
import { dividerChannel } from './divider-channel';

const rounds = 5;
const trials = 1_000_000;
const { model, output } = dividerChannel();
const script = fileURLToPath(new URL('./monte-carlo.py', import.meta.url));

function own(): { ms: number; standardUncertainty: number } {
	const start = performance.now();
	const [result] = simulate(model, [output], { seed: 7, trials });
	return { ms: performance.now() - start, standardUncertainty: result!.standardUncertainty };
}

interface Reference {
	ms: number;
	standardUncertainty: number;
}

function numpy(): Reference | null {
	const ran = spawnSync('python3', [script, String(trials)], { encoding: 'utf8' });
	return ran.status === 0 ? (JSON.parse(ran.stdout) as Reference) : null;
}

own();
const ours: number[] = [];
const theirs: number[] = [];
let check: unknown;
for (let round = 0; round < rounds; round++) {
	const mine = own();
	ours.push(mine.ms);
	const reference = numpy();
	if (reference) theirs.push(reference.ms);
	check = { own: mine.standardUncertainty, reference: reference?.standardUncertainty ?? null };
}
const ms = Math.min(...ours);
const reference = theirs.length > 0 ? Math.min(...theirs) : null;
process.stdout.write(
	`${JSON.stringify({ bench: 'monte-carlo', trials, ms, reference, ratio: reference && ms / reference, check })}\n`,
);
