import { correlate, uncorrelated, type Correlation, type Correlations } from './doubt/correlations';
import type { Node, NodeOf } from './language/nodes';
import type { Computed } from './memory';
import type { NoteLine } from './note-lines';
import { Trouble } from './trouble';

/** Whether a line says that two inputs are correlated. */
export function isStatement(line: NoteLine): boolean {
	return !line.requirement && line.kind === 'expression' && isCall(line.body);
}

export function linesOfStatements(lines: readonly NoteLine[]): NoteLine[] {
	return lines.filter(isStatement);
}

function isCall(node: Node | undefined): node is NodeOf<'call'> {
	return node?.kind === 'call' && node.name === 'correlated';
}

interface Sources {
	computed(name: string): Computed | undefined;
	coefficient(node: Node): number;
	fail(line: NoteLine, trouble: Trouble): void;
}

/** Puts what lines say of correlations together. A line that cannot be true beside the others is a fault. */
export function stateCorrelations(
	lines: readonly NoteLine[],
	sources: Sources,
	known: readonly Correlation[],
): Correlations {
	const stated = lines.flatMap((line) => pairOf(line, sources) ?? []);
	for (;;) {
		const correlations = correlate([...known, ...stated.map(({ pair }) => pair)]);
		if (!('fault' in correlations)) return correlations;
		const [wrong] = stated.splice(correlations.index - known.length, 1);
		if (!wrong) return uncorrelated;
		const at = correlations.fault === 'coefficient' ? wrong.body.args[2]! : wrong.body;
		sources.fail(wrong.line, new Trouble('value', at, `${correlations.message}.`));
	}
}

/** What one line states; undefined, with its fault told, where that is not possible. */
function pairOf(
	line: NoteLine,
	sources: Sources,
): { line: NoteLine; body: NodeOf<'call'>; pair: Correlation } | undefined {
	const { body } = line;
	if (!isCall(body)) return undefined;
	const [x, y, r] = body.args;
	try {
		const [first, second] = [inputOf(x!, sources), inputOf(y!, sources)];
		return { line, body, pair: { first, second, coefficient: sources.coefficient(r!) } };
	} catch (error) {
		if (!(error instanceof Trouble)) throw error;
		sources.fail(line, error);
		return undefined;
	}
}

/** The number of the input that a name stands for. Throws Trouble. */
function inputOf(node: Node, sources: Sources): number {
	const computed = node.kind === 'name' ? sources.computed(node.name) : undefined;
	const support = computed?.doubt?.steps[0]?.propagated.support;
	if (!computed || computed.inputs.length !== 1 || support?.length !== 1)
		throw new Trouble(
			'value',
			node,
			'Two inputs can be correlated: quantities that state an uncertainty of their own.',
			{
				mend: 'Name a quantity such as `R1 = tolerance(10 kohm, 1 %)`.',
			},
		);
	return computed.firstInput;
}
