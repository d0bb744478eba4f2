import { functions } from './functions/registry';
import { partsOf, type Node } from './language/nodes';
import type { NoteLine } from './note-lines';

const stating = new WeakMap<Node, boolean>();
const reading = new WeakMap<Node, boolean>();

/** Whether an expression contains a call that states an input. */
export function statesInput(node: Node): boolean {
	return found(node, stating, (name) => {
		const known = functions.get(name);
		return known?.states !== undefined || known?.restates !== undefined;
	});
}

/** Whether an expression asks for the uncertainty of something, on which correlations bear. */
export function readsUncertainty(node: Node): boolean {
	return found(node, reading, (name) => functions.get(name)?.reads === 'uncertainty');
}

function found(
	node: Node,
	known: WeakMap<Node, boolean>,
	wanted: (name: string) => boolean,
): boolean {
	let answer = known.get(node);
	if (answer === undefined) {
		const open: Node[] = [node];
		answer = false;
		for (let at = open.pop(); at && !answer; at = open.pop()) {
			if (at.kind === 'call' && wanted(at.name)) answer = true;
			open.push(...partsOf(at));
		}
		known.set(node, answer);
	}
	return answer;
}

/** Which functions of a note bring something in doubt with them, whatever they are called with. */
export class DoubtfulFunctions {
	readonly #known = new Map<string, boolean>();

	constructor(
		private readonly definition: (name: string) => NoteLine | undefined,
		private readonly inDoubt: (name: string) => boolean,
	) {}

	has(name: string): boolean {
		let answer = this.#known.get(name);
		if (answer === undefined) this.#known.set(name, (answer = this.#reaches(name)));
		return answer;
	}

	/** Follows the functions that a function calls; they may call one another in circles. */
	#reaches(name: string): boolean {
		const seen = new Set([name]);
		for (const each of seen) {
			const line = this.definition(each);
			if (line?.curve && line.curve.deviations.length > 0) return true;
			if (!line?.body || line.kind !== 'function') continue;
			if (statesInput(line.body)) return true;
			for (const reference of line.references) {
				if (this.definition(reference.name)?.kind === 'function') seen.add(reference.name);
				else if (this.inDoubt(reference.name)) return true;
			}
		}
		return false;
	}
}
