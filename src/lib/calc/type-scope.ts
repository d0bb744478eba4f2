import type { Node } from './language/nodes';
import type { ParsedLine } from './language/parse-line';
import type { Type } from './types';

/** What a line may refer to while its units are checked. */
export interface Types {
	/** Undefined for a name that has no usable type yet. */
	of(name: string): Type | undefined;
	function(name: string): ParsedLine | undefined;
	/** The number an expression has, where it can be told; exponents decide over units. */
	constant(node: Node): number | undefined;
	/** Calls being checked; a call inside itself is taken as unknown. */
	readonly calls: Map<string, Type>;
	/** The note, seen from inside a function, which does not know what its caller bound. */
	readonly note?: Types;
	/** Calls that this line may still check, and how often one met itself. */
	readonly budget: { calls: number; pending: number };
}
