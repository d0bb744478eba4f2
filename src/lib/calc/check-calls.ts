import type { Argument } from './functions/function';
import { functions } from './functions/registry';
import type { Node, NodeOf } from './language/nodes';
import { Trouble } from './trouble';
import type { Types } from './type-scope';
import { unknown, type Type } from './types';

/** Stands for a call that is being checked. */
const pending: Type = { kind: 'unknown' };

/** Finds the type of an expression; the caller's own way to do so. */
type Check = (node: Node, types: Types) => Type;

/** Type of a call: of a function of the language by its own rule, of a note's function by what it is called with. */
export function checkCall(node: NodeOf<'call'>, types: Types, check: Check): Type {
	const args: Argument[] = node.args.map((argument) => ({
		from: argument.from,
		to: argument.to,
		type: check(argument, types),
		...(argument.kind === 'unit' && { unit: argument.unit }),
	}));
	const own = types.function(node.name);
	const known = functions.get(node.name) ?? own?.curve?.fn;
	if (known) {
		expectCount(node, known.count, known.signature);
		return known.type(args);
	}
	if (!own?.body) return unknown;
	const { parameters, body } = own;
	const signature = `${node.typed}(${parameters.map((p) => p.typed).join(', ')})`;
	expectCount(node, [parameters.length, parameters.length], signature);
	return checkOwn(
		node,
		body,
		parameters.map((p) => p.name),
		args,
		types,
		check,
	);
}

function checkOwn(
	node: NodeOf<'call'>,
	body: Node,
	names: string[],
	args: Argument[],
	types: Types,
	check: Check,
): Type {
	const key = `${node.name}(${args.map(({ type }) => `${type.kind} ${type.dimension?.key ?? '?'} ${type.point ? 'p' : ''} ${type.unit?.text ?? ''} ${type.text === undefined ? '' : JSON.stringify(type.text)}`).join(';')})`;
	const earlier = types.calls.get(key);
	if (earlier === pending) types.budget.pending += 1;
	if (earlier) return earlier;
	if (types.budget.calls-- <= 0)
		throw new Trouble('tooLong', node, 'The functions of this note call one another too often.');
	types.calls.set(key, pending);
	const before = types.budget.pending;
	const exponent = { byValue: false };
	const given = args.map(({ type }) => type);
	const inner = boundTypes(types, names, given, node.args, () => (exponent.byValue = true));
	try {
		const type = check(body, inner);
		// An exponent that the call gives decides over the unit, so that the next call may have another.
		// Unknown is what a call inside itself gives, and no answer for a call from elsewhere.
		if (exponent.byValue || (types.budget.pending > before && !type.dimension))
			types.calls.delete(key);
		else types.calls.set(key, type);
		return type;
	} catch (error) {
		types.calls.delete(key);
		if (!(error instanceof Trouble)) throw error;
		const first = error.message.charAt(0).toLowerCase() + error.message.slice(1);
		throw new Trouble(
			error.code,
			node,
			`\`${node.typed}\` cannot take these values: it ${first}`,
			{},
		);
	}
}

/** What a function's body may refer to where it is called with `values` of these types. */
export function boundTypes(
	types: Types,
	names: readonly string[],
	given: readonly Type[],
	values: Node[],
	onExponent?: () => void,
): Types {
	const bound = new Map(names.map((name, i) => [name, given[i] ?? unknown]));
	const note = types.note ?? types;
	return {
		of: (name) => bound.get(name) ?? note.of(name),
		function: (name) => note.function(name),
		note,
		constant: (wanted) => {
			if (wanted.kind === 'number') return wanted.value;
			onExponent?.();
			return types.constant(substituted(wanted, names, values));
		},
		calls: types.calls,
		budget: types.budget,
	};
}

/** The expression with a call's values in place of the parameters; only for the short expressions of exponents. */
function substituted(node: Node, names: readonly string[], values: Node[]): Node {
	if (node.kind === 'name') {
		const index = names.indexOf(node.name);
		return (index < 0 ? undefined : values[index]) ?? node;
	}
	if (node.kind === 'unary') return { ...node, value: substituted(node.value, names, values) };
	if (node.kind === 'binary')
		return {
			...node,
			left: substituted(node.left, names, values),
			right: substituted(node.right, names, values),
		};
	return node;
}

function expectCount(
	node: NodeOf<'call'>,
	[least, most]: readonly [number, number],
	signature: string,
): void {
	const given = node.args.length;
	if (given >= least && given <= most) return;
	const wanted =
		least === most ? `${least}` : most === Infinity ? `${least} or more` : `${least} to ${most}`;
	throw new Trouble(
		'syntax',
		node,
		`\`${node.typed}\` takes ${wanted} value${wanted === '1' ? '' : 's'}, not ${given}.`,
		{
			mend: `Write \`${signature}\`.`,
		},
	);
}
