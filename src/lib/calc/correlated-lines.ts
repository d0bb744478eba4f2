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

/** Puts what lines say of correlations together. A line that cannot be true beside the ones before it is a fault. */
export function stateCorrelations(
	lines: readonly NoteLine[],
	sources: Sources,
	known: readonly Correlation[],
): Correlations {
	const pairs = [...known];
	let stated = uncorrelated;
	const before = correlate(pairs);
	if (!('fault' in before)) stated = before;
	for (const line of lines) {
		const { body } = line;
		if (!isCall(body)) continue;
		try {
			const [x, y, r] = body.args;
			const pair = {
				first: inputOf(x!, sources),
				second: inputOf(y!, sources),
				coefficient: sources.coefficient(r!),
			};
			const joined = correlate([...pairs, pair]);
			if ('fault' in joined) {
				const at = joined.fault === 'coefficient' ? r! : body;
				throw new Trouble('value', at, `${joined.message}.`);
			}
			pairs.push(pair);
			stated = joined;
		} catch (error) {
			if (!(error instanceof Trouble)) throw error;
			sources.fail(line, error);
		}
	}
	return stated;
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
