import { members, type Value } from '../values';

/** All numbers of all values, lists spread out. */
export function gathered(args: Value[]): Float64Array {
	const [only] = args;
	if (args.length === 1 && only !== undefined) return Float64Array.from(members(only));
	return Float64Array.from(args.flatMap((value) => [...members(value)]));
}
