import { fork } from 'node:child_process';
import { readFile } from 'node:fs/promises';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import type { Options, SourceCell } from '$lib/calc/results';
import type { Answer, Task } from '$lib/server/evaluation/exchange';
import { agree, medianMs } from './clock';
import { python } from './python';
import { quantile, row, type Row } from './row';

/** A divider before a converter with twelve inputs in doubt, the model of `monte-carlo.py`. */
const channel: SourceCell[] = [
	{
		id: 'c',
		kind: 'calculation',
		source: `Vin = normal(24 V, 1 mV)
warming = rectangular(0 K, 30 K)
alpha1 = rectangular(0 / K, 1e-4 / K)
alpha2 = rectangular(0 / K, 1e-4 / K)
R1 = tolerance(470 kohm, 1 %) * (1 + alpha1 * warming)
R2 = tolerance(47 kohm, 1 %) * (1 + alpha2 * warming)
Rin = rectangular(10 Mohm, 2 Mohm)
leakage = rectangular(0 nA, 50 nA)
gain = rectangular(1, 1e-3 * 1)
offset1 = normal(0 V, 0.5 mV)
nonlinearity = rectangular(0 V, 0.6 mV)
rounding = rectangular(0 V, 0.3 mV)
low = parallel(R2, Rin)
Vdiv = Vin * low / (low + R1)
Vadc = (Vdiv - leakage * parallel(R1, low)) * gain + offset1 + nonlinearity + rounding
Vmeasured = Vadc / (47 / 517)`,
	},
];
const trials = 1_000_000;
const options: Options = {
	...defaultOptions,
	monteCarlo: { quantities: ['Vmeasured'], trials, seed: 7 },
};

/** Trials of the channel beside the same model vectorised in NumPy, and what memory a child takes for them. */
export async function trialRows(): Promise<Row[]> {
	const { quantities, errors } = evaluate(channel, options);
	const found = quantities.Vmeasured?.monteCarlo;
	if (!found) throw new Error(`the channel was not computed: ${JSON.stringify(errors)}`);
	const peer = python('monte-carlo.py', String(trials));
	// Two sets of a million trials agree in their standard uncertainty to 1 in 1000.
	if (peer) agree(found.standardUncertainty, peer.standardUncertainty, 5e-3);
	const alone = medianMs(() => void evaluate(channel, options), 7);
	return [
		row({
			id: 'engine.trials-1e6',
			what: 'a million trials of a channel with 12 inputs, one core; peer: NumPy, one core',
			value: alone,
			unit: 'ms',
			...(peer && { peer: peer.ms }),
			most: 1,
		}),
		...(await childRows(peer?.ms)),
	];
}

/** An evaluator child: trials with its second thread, and its memory after them and after a thousand edits (Linux). */
async function childRows(peer: number | undefined): Promise<Row[]> {
	const child = fork('build/evaluator.js', [], {
		env: {},
		execArgv: ['--max-old-space-size=192'],
		stdio: ['ignore', 'ignore', 'ignore', 'ipc', 'pipe'],
	});
	child.stdio[4]?.on('data', () => undefined);
	let id = 0;
	const ask = (task: Pick<Task, 'cells' | 'options'>) =>
		new Promise<void>((resolve) => {
			const wanted = ++id;
			const hear = (message: unknown) => {
				const answer = message as Answer;
				if (answer.kind !== 'done' || answer.id !== wanted) return;
				child.off('message', hear);
				resolve();
			};
			child.on('message', hear);
			child.send({ ...task, id: wanted, skip: [], note: 'n' } satisfies Task);
		});
	const edit = (n: number): SourceCell[] =>
		channel.map((cell) => ({ ...cell, source: cell.source.replace('24 V', `${20 + (n % 9)} V`) }));
	const memory = async () => {
		const pages = (await readFile(`/proc/${child.pid ?? 0}/statm`, 'utf8')).split(' ')[1];
		return (Number(pages) * 4096) / 1e6;
	};
	try {
		const times: number[] = [];
		for (let round = 0; round < 8; round++) {
			const start = performance.now();
			await ask({ cells: channel, options });
			times.push(performance.now() - start);
		}
		const afterTrials = await memory();
		const edits = async (count: number) => {
			for (let n = 0; n < count; n++) await ask({ cells: edit(n), options: defaultOptions });
			return memory();
		};
		const before = await edits(500);
		const after = await edits(1_000);
		return [
			row({
				id: 'engine.trials-two-threads',
				what: 'the same trials in an evaluator, which draws them with two threads; peer: NumPy, one core',
				// The first round starts the second thread.
				value: quantile(times.slice(1), 0.5),
				unit: 'ms',
				...(peer !== undefined && { peer }),
				most: 0.55,
			}),
			row({
				id: 'engine.memory-trials',
				what: 'memory of an evaluator after a million trials',
				value: afterTrials,
				unit: 'MB',
				target: 250,
			}),
			row({
				id: 'engine.memory-edits',
				what: 'memory of it after 1,000 edits more; peer: before them',
				value: after,
				unit: 'MB',
				target: 250,
				peer: before,
				most: 1.2,
			}),
		];
	} finally {
		// It goes when nobody is there to ask it.
		child.disconnect();
	}
}
