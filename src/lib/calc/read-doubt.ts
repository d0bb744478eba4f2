import { uncertaintyOf } from './doubt/budget';
import type { Correlations } from './doubt/correlations';
import { TapeBuilder } from './doubt/tape';
import type { Inputs } from './inputs';
import type { Node } from './language/nodes';
import { run } from './run';
import { Bounds, stepsOf } from './steps';
import { Tracer, type Surroundings } from './trace';
import { isExact, nodesOf, shapeOf } from './traced';
import { Trouble } from './trouble';

/** The uncertainty or a bound of an expression of a line, in SI units. Throws Trouble. */
export function readDoubt(
	what: 'uncertainty' | 'lower' | 'upper',
	node: Node,
	surroundings: Surroundings,
	{ inputs, correlations }: { inputs: Inputs; correlations: Correlations },
): number {
	const tracer = new Tracer(surroundings, new TapeBuilder(), () => '');
	const traced = tracer.trace(node);
	if (isExact(traced)) return what === 'uncertainty' ? 0 : Number(run(node, surroundings.scope));
	if (shapeOf(traced)) throw new Trouble('value', node, 'One number is expected here, not a list.');
	// Inputs stated within the brackets are no inputs of the note.
	const all = inputs.with(tracer.inputs);
	const nodes = nodesOf(tracer.tape, traced);
	const own = tracer.inputs.length;
	const [step] = stepsOf(tracer.tape, nodes, tracer.args, inputs.next, all, own, false);
	if (what !== 'uncertainty') return new Bounds([step!], all).of(step!)[what];
	const { uncertainties, dofs } = all;
	return uncertaintyOf(step!.propagated, { uncertainties, dofs, correlations }, 0.95)
		.standardUncertainty;
}
