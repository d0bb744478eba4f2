/**
 * All budgets of a note of 200 lines with 30 doubtful inputs, beside the plain evaluation of the same tapes. Prints one
 * line of JSON: milliseconds (the least of the rounds) of values alone, of first order with coverage, with second order
 * too, and of worst cases. Run with tsx.
 */
import { budgetOf, secondOrderOf, uncertaintyOf, type Doubts } from '$lib/calc/doubt/budget';
import type { Distribution } from '$lib/calc/doubt/distributions/distribution';
import { rectangular } from '$lib/calc/doubt/distributions/rectangular';
import { enclose, type Enclosure } from '$lib/calc/doubt/enclose';
import type { Step } from '$lib/calc/doubt/model';
import { propagate, type Propagated } from '$lib/calc/doubt/propagate';
import { TapeBuilder } from '$lib/calc/doubt/tape';
import { evaluateTape, nodesFor } from '$lib/calc/doubt/values';
import { worstCase } from '$lib/calc/doubt/worst-case';

const inputs = 30;
const lines = 200;
const steps: Step[] = [];
for (let i = 0; i < inputs; i++) {
	const tape = new TapeBuilder();
	const node = tape.binary('add', tape.constant(1 + i / 10), tape.input(0));
	steps.push({ tape: tape.finish(node), args: [], inputs: [i] });
}
// Each line takes the line before it, so that the last ones depend on all inputs, and two others.
for (let i = inputs; i < lines; i++) {
	const tape = new TapeBuilder();
	const [x, y, z] = [0, 1, 2].map((k) => tape.argument(k)) as [number, number, number];
	const ratio = tape.binary('div', x, tape.binary('add', x, y));
	const node = tape.binary('add', ratio, tape.unary('sqrt', tape.binary('mul', z, y)));
	steps.push({
		tape: tape.finish(node),
		args: [i - 1, (7 * i) % inputs, (11 * i) % inputs],
		inputs: [],
	});
}
const distributions = Array.from({ length: inputs }, () => rectangular(1e-3)) as Distribution[];
const doubts: Doubts = {
	uncertainties: distributions.map(({ uncertainty }) => uncertainty),
	dofs: distributions.map(({ dof }) => dof),
};
const widths = distributions.map(() => 1e-3);

function plain(): void {
	const values: number[] = [];
	for (const { tape, args } of steps)
		values.push(
			evaluateTape(
				tape,
				Array.from(args, (arg) => values[arg]!),
				nodesFor(tape),
			),
		);
}

function budgets(second: boolean): void {
	const all: Propagated[] = [];
	for (const { tape, args, inputs: own } of steps) {
		const given = Array.from(args, (arg) => all[arg]!);
		const line = propagate(tape, given, own, doubts.uncertainties, second);
		all.push(line);
		uncertaintyOf(line, doubts, 0.95);
		budgetOf(line, doubts);
		secondOrderOf(line, doubts);
	}
}

function worstCases(): void {
	const all: Enclosure[] = [];
	steps.forEach(({ tape, args, inputs: own }, place) => {
		all.push(
			enclose(
				tape,
				Array.from(args, (arg) => all[arg]!),
				own,
				widths,
			),
		);
		worstCase({ steps, inputs: distributions }, place, all[place]!, widths);
	});
}

function least(run: () => void): number {
	let best = Infinity;
	for (let round = 0; round < 30; round++) {
		const start = performance.now();
		run();
		best = Math.min(best, performance.now() - start);
	}
	return best;
}

const result = {
	plain: least(plain),
	firstOrder: least(() => budgets(false)),
	secondOrder: least(() => budgets(true)),
	worstCases: least(worstCases),
};
process.stdout.write(`${JSON.stringify({ bench: 'budgets', lines, inputs, ms: result })}\n`);
