import { bounds } from './bounds';
import type { CurveFunction } from './curve-function';
import { boundTypes } from './check-calls';
import type { Distribution } from './doubt/distributions/distribution';
import { Refusal, type CalcFunction } from './functions/function';
import { functions } from './functions/registry';
import { isRelative } from './functions/stated';
import type { NodeOf } from './language/nodes';
import { Frame as Bound, run, tell } from './run';
import type { Frame, Tracer } from './trace';
import { join } from './trace-operators';
import { isExact, mapNodes, nodesOf, shapeOf, type Traced } from './traced';
import { Trouble } from './trouble';
import { isGrid, map, type Grid, type Value } from './values';

/** Puts a call in doubt on the tape. Throws Trouble. */
export function traceCall(tracer: Tracer, node: NodeOf<'call'>, frame: Frame): Traced {
	const known = functions.get(node.name);
	if (!known) return traceOwn(tracer, node, frame);
	try {
		if (known.states || known.restates) return traceStatement(tracer, node, frame);
		const args = node.args.map((argument) => tracer.trace(argument, frame));
		if (known.trace) return known.trace(tracer.tape, args);
		return traceWhole(tracer, known, node, args, frame);
	} catch (error) {
		if (error instanceof Refusal) throw tell(error, node);
		throw error;
	}
}

/** A call of a function of the note: its body stands on the tape of the line that calls it. */
function traceOwn(tracer: Tracer, node: NodeOf<'call'>, frame: Frame): Traced {
	const { scope } = frame;
	const own = scope.function(node.name);
	if (own?.curve) return traceCurve(tracer, own.curve, node, frame);
	if (!own?.body) throw new Trouble('waits', node, `Waits for \`${node.typed}\`.`);
	if (scope.depth >= bounds.calls || scope.levels > bounds.levels)
		throw new Trouble(
			'tooDeep',
			node,
			`The calls of \`${node.typed}\` stand too deeply in one another.`,
			{
				mend: 'Give it a case that ends and that does not depend on something in doubt.',
			},
		);
	const args = node.args.map((argument) => tracer.trace(argument, frame));
	const values = node.args.map((argument, i) => {
		const traced = args[i]!;
		return isExact(traced) ? traced.exact : run(argument, scope);
	});
	const types = node.args.map((argument) => tracer.typeOf(argument, frame));
	const names = own.parameters.map((parameter) => parameter.name);
	try {
		return tracer.trace(own.body, {
			scope: new Bound(scope, own, values),
			types: boundTypes(frame.types, names, types, node.args),
			bound: new Map(names.map((name, i) => [name, args[i]!])),
		});
	} catch (error) {
		// Columns inside a function are those of its own line; the caller is told where it called.
		if (error instanceof Trouble && scope.depth === 0)
			throw new Trouble(error.code, node, error.message, error.how);
		throw error;
	}
}

/** A call of a curve: the deviations of its fit are operands beside the value. */
function traceCurve(
	tracer: Tracer,
	{ external, deviations }: CurveFunction,
	node: NodeOf<'call'>,
	frame: Frame,
): Traced {
	const [argument] = node.args;
	const x = tracer.trace(argument!, frame);
	const parts = deviations.map((step) => tracer.argument(step));
	return mapNodes(tracer.tape, x, (at) => tracer.tape.call(external, [at, ...parts]));
}

/** A call that states an input: its centre, and a deviation that is zero at the estimate. */
function traceStatement(tracer: Tracer, node: NodeOf<'call'>, frame: Frame): Traced {
	const { tape } = tracer;
	const { distribution, call } = statedBy(tracer, node, frame);
	const known = functions.get(call.name)!;
	const [first] = call.args;
	const centred = known.states?.centred ?? false;
	const centre: Traced =
		centred && first ? tracer.trace(first, frame) : { exact: run(call, frame.scope) };
	const at = join(tape, centre, first ?? node);
	if (!distribution) return isExact(centre) ? centre : { node: at };
	const type = tracer.typeOf(call, frame);
	const value = Number(run(call, frame.scope));
	const deviation = tracer.input({ distribution, value, type }, node);
	return { node: tape.binary('add', at, deviation) };
}

/** The distribution that a call states, undefined for one of no width, and the innermost call that states it. */
function statedBy(
	tracer: Tracer,
	node: NodeOf<'call'>,
	frame: Frame,
): { distribution: Distribution | undefined; call: NodeOf<'call'> } {
	const known = functions.get(node.name)!;
	const values = node.args.map((argument) => run(argument, frame.scope));
	if (known.restates) {
		const [inner] = node.args;
		const stating = inner?.kind === 'call' ? functions.get(inner.name) : undefined;
		if (inner?.kind !== 'call' || !(stating?.states ?? stating?.restates))
			throw new Trouble(
				'value',
				inner ?? node,
				`\`${node.typed}\` stands around the function that states the uncertainty.`,
				{
					mend: `Write \`${node.typed}(normal(x, u), n)\`, say.`,
				},
			);
		const { distribution, call } = statedBy(tracer, inner, frame);
		const changed = distribution && known.restates(distribution, values);
		if (changed && 'fault' in changed) throw parameterFault(node, changed);
		return { distribution: changed, call };
	}
	const statement = known.states!;
	const widths = statement.widths.filter((position) => position < node.args.length);
	if (statement.centred && isGrid(values[0] ?? 0))
		throw new Trouble(
			'value',
			node.args[0] ?? node,
			'An uncertainty is stated of one number, not of a list.',
		);
	const centreType = node.args[0] && tracer.typeOf(node.args[0], frame);
	for (const position of widths) {
		const argument = node.args[position]!;
		if (!centreType || !isRelative(centreType, tracer.typeOf(argument, frame))) continue;
		if (Number(values[0]) === 0)
			throw new Trouble('value', argument, 'A share of zero is nothing.', {
				mend: 'Give it in the unit of the value.',
			});
		values[position] = map(values[position]!, (share) => share * Math.abs(Number(values[0])));
	}
	if (
		widths.length > 0 &&
		widths.every((position) => values[position] === 0) &&
		Number(values[0]) !== 0
	)
		throw new Trouble('value', node.args[widths[0]!]!, 'An uncertainty of zero states nothing.', {
			mend: 'Write the value alone where it is exact.',
		});
	const distribution = statement.distribution(values);
	if ('fault' in distribution) throw parameterFault(node, distribution);
	return { distribution, call: node };
}

function parameterFault(
	node: NodeOf<'call'>,
	{ parameter, message }: { parameter: number; message: string },
): Trouble {
	return new Trouble('value', node.args[parameter] ?? node, `${message}.`);
}

/** A function without a way onto the tape: called as a whole, its slopes its own or differences. */
function traceWhole(
	tracer: Tracer,
	known: CalcFunction,
	node: NodeOf<'call'>,
	args: readonly Traced[],
	frame: Frame,
): Traced {
	const { tape } = tracer;
	const plain = run(node, frame.scope);
	if (typeof plain === 'string') return { exact: plain };
	if (isGrid(plain))
		throw new Trouble(
			'value',
			node,
			`\`${node.typed}\` gives a list, whose uncertainty is not followed.`,
			{
				mend: 'Take the plain values, `value(x)`.',
			},
		);
	const operands = args.flatMap((arg) => (isExact(arg) ? [] : nodesOf(tape, arg)));
	const single = args.every((arg) => !shapeOf(arg) || isExact(arg));
	const { slopes } = known;
	const external = {
		name: known.name,
		value: (operands: Float64Array) => {
			try {
				return Number(known.compute(filled(args, operands)));
			} catch (error) {
				if (error instanceof Refusal) return NaN;
				throw error;
			}
		},
		...(slopes &&
			single && {
				slopes: (operands: Float64Array, into: Float64Array) => {
					const found = slopesAt(slopes, filled(args, operands));
					let at = 0;
					args.forEach((arg, i) => {
						if (!isExact(arg)) into[at++] = found[i] ?? 0;
					});
				},
			}),
	};
	return { node: tape.call(external, operands) };
}

function slopesAt(slopes: NonNullable<CalcFunction['slopes']>, values: Value[]): number[] {
	try {
		return slopes(values);
	} catch (error) {
		if (error instanceof Refusal) return values.map(() => NaN);
		throw error;
	}
}

/** The values of a call with numbers in place of what is in doubt. */
function filled(args: readonly Traced[], operands: Float64Array): Value[] {
	let at = 0;
	return args.map((arg): Value => {
		if (isExact(arg)) return arg.exact;
		if ('node' in arg) return operands[at++]!;
		const data = operands.slice(at, at + arg.nodes.length);
		at += arg.nodes.length;
		return { shape: arg.shape, data } satisfies Grid;
	});
}
