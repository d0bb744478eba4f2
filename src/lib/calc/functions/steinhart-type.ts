import { isPure } from '../types';
import type { Argument } from './function';
import { dimensionOf } from './in-unit';
import { expectNumber, refusePoint } from './function';
import { Trouble } from '../trouble';
import { spoken } from '../types';
import { none, over, same } from '../units/dimension';

const perKelvin = over(none, dimensionOf('K'));

/** Coefficients may be plain, as data sheets print them, or in 1/K: the resistance counts in ohms. Throws Trouble. */
export function expectCoefficients(coefficients: Argument[]): void {
	for (const argument of coefficients) {
		expectNumber(argument, 'A coefficient takes');
		refusePoint(argument, 'Computes with');
		const { dimension } = argument.type;
		if (!dimension || isPure(argument.type) || same(dimension, perKelvin)) continue;
		throw new Trouble(
			'dimension',
			argument,
			`A coefficient is a plain number or in 1/K, not in ${spoken(argument.type)}.`,
		);
	}
}
