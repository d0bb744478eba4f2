import { statesInput } from '../doubtful-calls';
import { functions } from '../functions/registry';
import { hasNames, type Node } from '../language/nodes';
import type { Note } from '../note';
import type { NoteLine } from '../note-lines';
import { unitOf } from '../show';
import { Trouble } from '../trouble';
import type { Type } from '../types';
import { fromSI } from '../units/unit';
import type { SweepName } from './sweep-line';

/** An input that takes other values than the one its line gives it. */
export interface SweptInput {
	line: NoteLine;
	type: Type;
	/** Its value in the note, SI. */
	present: number;
	/** The formula of its line with another value; the doubt it states stays. */
	bodyAt(si: number): Node;
}

/** The input of a name. Throws Trouble where the name is none, or none that can take other values. */
export function sweptInput(over: SweepName, line: NoteLine, note: Note): SweptInput {
	const computed = note.computed.get(line);
	if (!computed) throw note.waiting(over.typed, line, over);
	const { type, value } = computed;
	const { body } = line;
	if (line.given || typeof value !== 'number' || !body)
		throw new Trouble('value', over, `\`${over.typed}\` is no single number.`, {
			mend: 'Draw over an input that is one.',
		});
	if (hasNames(body)) {
		const names = inputsBehind(line, note);
		throw new Trouble(
			'value',
			over,
			`\`${over.typed}\` is computed from others, so that it cannot take values of its own.`,
			names.length > 0 ? { mend: `Draw over an input of it: ${names.join(', ')}.` } : {},
		);
	}
	if (!replaced(body, { ...body, kind: 'boolean', value: true }))
		throw new Trouble('value', over, `\`${over.typed}\` has no single value to be replaced.`, {
			mend: 'State it as one value with its doubt: `normal(5 V, 2 mV)`, say.',
		});
	const unit = unitOf(type);
	return {
		line,
		type,
		present: value,
		bodyAt: (si) =>
			replaced(body, {
				kind: 'number',
				value: si,
				typed: fromSI(si, unit),
				unit: unit.parts.length > 0 ? unit : undefined,
				from: body.from,
				to: body.to,
			})!,
	};
}

/** A formula of no names with another value, within the calls that state its doubt; undefined where it has none alone. */
function replaced(body: Node, value: Node): Node | undefined {
	if (!statesInput(body)) return value;
	if (body.kind !== 'call') return undefined;
	const known = functions.get(body.name);
	const [first, ...others] = body.args;
	if (!first || !(known?.states?.centred || known?.restates)) return undefined;
	const inner = replaced(first, value);
	return inner && { ...body, args: [inner, ...others] };
}

const mostNamed = 4;

/** Inputs that a computed quantity goes back to, the first few. */
function inputsBehind(line: NoteLine, note: Note): string[] {
	const seen = new Set<NoteLine>([line]);
	const names: string[] = [];
	for (const each of seen) {
		if (each.body && !hasNames(each.body) && each.kind === 'definition')
			names.push(`\`${each.defined?.typed ?? ''}\``);
		if (names.length === mostNamed) break;
		for (const { name } of each.references) {
			const used = note.definition(name);
			if (used && !used.given) seen.add(used);
		}
	}
	return names;
}
