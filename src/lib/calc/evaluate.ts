import { Calculator } from './calculator';
import type { Watch } from './note-lines';
import type { Cell, Evaluation, Options } from './results';

export { defaultOptions, engineVersion } from './engine';

/**
 * Computes a note. Pure: the same cells and options give the same results, and no input makes it throw. `watch` is
 * for the process around it that must be able to end it.
 */
export function evaluate(cells: readonly Cell[], options: Options, watch: Watch = {}): Evaluation {
	return new Calculator().evaluate(cells, options, watch);
}
