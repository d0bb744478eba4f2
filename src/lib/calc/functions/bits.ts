import { findSymbol } from '../units/table';
import { isPure } from '../types';
import { isGrid, type Value } from '../values';
import { expectNumber, expectPure, Refusal, type Argument } from './function';

/** A number of bits may be plain or carry the unit: `12` or `12 bit`. */
export function expectBits(argument: Argument): void {
	const { dimension } = argument.type;
	expectNumber(argument, 'The number of bits takes');
	if (dimension && !isPure(argument.type) && dimension !== findSymbol('bit')?.dimension)
		expectPure(argument, 'The number of bits');
}

/** The number of bits of a converter. Throws Refusal. */
export function wholeBits(value: Value | undefined): number {
	const bits = isGrid(value ?? 0) ? NaN : Number(value);
	if (!Number.isInteger(bits) || bits < 1 || bits > 32)
		throw new Refusal('The number of bits is a whole number from 1 to 32.');
	return bits;
}
