import { evaluate } from '$lib/calc/evaluate';
import type { Cell, Evaluation, Options } from '$lib/calc/results';
import { Answers } from './answers';
import type { Case, Figure } from './case';
import { judge } from './judge';
import type { Proof, Row } from './proof';
import { scatterOf, trialOptions } from './trials';

/** Computes a case from its lines and holds every figure against print. Throws where the engine finds an error in them. */
export function prove(of: Case): Proof {
	const answers = new Map<string, Answers>();
	const rows = of.figures.map((figure, i): Row => {
		const options = optionsOf(of, figure);
		const key = JSON.stringify([options.coverage, options.decisionRule]);
		let found = answers.get(key);
		if (!found) answers.set(key, (found = new Answers(computed(of, options))));
		return rowOf(figure, i, found);
	});
	return {
		id: of.id,
		title: of.title,
		source: of.source,
		...(of.note !== undefined && { note: of.note }),
		lines: stated(of),
		rows,
	};
}

function optionsOf(of: Case, figure: Figure): Options {
	return {
		coverage: figure.coverage ?? of.coverage ?? 0.95,
		decisionRule: figure.decisionRule ?? 'guarded',
		detail: of.figures.some(({ ask }) => ask?.[0] === 'contribution') ? 'all' : [],
		...(of.trials && { monteCarlo: { ...trialOptions, quantities: of.trials } }),
	};
}

function computed(of: Case, options: Options): Evaluation {
	const results = evaluate(cellsOf(of), options);
	const [error] = results.errors;
	if (error) throw new Error(`${of.id}: ${error.cell}, line ${error.line}: ${error.message}`);
	return results;
}

function cellsOf({ readings, curve, lines = [], figures }: Case): Cell[] {
	const asked = figures.flatMap(({ formula }, i) => (formula ? [`figure${i} = ${formula}`] : []));
	return [
		...(readings ? [{ id: 'readings', kind: 'readings' as const, columns: readings }] : []),
		...(curve ? [{ id: 'curve', kind: 'curve' as const, ...curve }] : []),
		{ id: 'lines', kind: 'calculation', source: lines.join('\n') },
		{ id: 'figures', kind: 'calculation', source: asked.join('\n') },
		...figures.flatMap((figure): Cell[] => {
			const limit = limitOf(figure);
			return limit === undefined ? [] : [{ id: limit, kind: 'requirement', source: limit }];
		}),
	];
}

/** The comparison that a figure asks for; its text is the name of its cell. */
function limitOf({ ask }: Figure): string | undefined {
	const decides = ['probability', 'improbability', 'verdict'].includes(String(ask?.[0]));
	return decides ? String(ask?.[1]) : undefined;
}

function rowOf(figure: Figure, i: number, answers: Answers): Row {
	const { quantity, unit, published, recomputed, formula, confirmed, note } = figure;
	const value = figure.ask ? answers.read(figure.ask) : answers.value(`figure${i}`);
	return {
		what: quantity,
		unit,
		published,
		...(recomputed !== undefined && { recomputed }),
		computed: value,
		...judge(figure, value, scatterOf(figure, answers)),
		...(formula !== undefined && { formula }),
		confirmed,
		...(note !== undefined && { note }),
	};
}

function stated({ readings = [], curve, lines = [] }: Case): string[] {
	return [
		...readings.map(({ name, values }) => `# ${name}: ${values.length} readings`),
		...(curve ? [`# ${curve.name}: degree ${curve.degree}, ${curve.y} over ${curve.x}`] : []),
		...lines,
	];
}
