import { isExact, type Traced } from '../traced';
import type { Value } from '../values';
import { Refusal } from './function';

/** The value of something that must be exact. Throws Refusal. */
export function plainValue(traced: Traced, what: string): Value {
	if (isExact(traced)) return traced.exact;
	throw new Refusal(`${what} is exact, and this is in doubt.`, 'Take its plain value, `value(x)`.');
}
