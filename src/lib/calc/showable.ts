import { finite } from './arithmetic';
import type { Node } from './language/nodes';
import { unitOf } from './show';
import type { Type } from './types';
import { fromSI } from './units/unit';
import { map, type Value } from './values';

/** Throws Trouble where a value that can be computed with has no number in the unit it is given in: 1e300 J in eV. */
export function expectShowable(value: Value, type: Type, body: Node): void {
	if (typeof value === 'string' || typeof value === 'boolean') return;
	const unit = unitOf(type);
	finite(
		map(value, (x) => fromSI(x, unit)),
		body,
	);
}
