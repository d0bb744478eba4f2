import { writeBands } from '../tables/colour-bands';
import { Trouble } from '../trouble';
import { spoken } from '../types';
import { none, over, same } from '../units/dimension';
import { answered } from './answered';
import { expectPure, scalar, type Argument, type CalcFunction } from './function';
import { dimensionOf, expectUnit } from './in-unit';

const perKelvin = over(none, dimensionOf('K'));

function expectDrift(drift: Argument): void {
	if (drift.type.dimension && same(drift.type.dimension, perKelvin)) return;
	if (drift.type.kind === 'unknown') return;
	throw new Trouble(
		'dimension',
		drift,
		`The temperature coefficient is in 1/K, not ${spoken(drift.type)}.`,
		{ mend: 'Write `50 ppm/K`, say.' },
	);
}

export const bands: CalcFunction = {
	name: 'bands',
	signature: 'bands(R[, tolerance[, drift]])',
	help: 'Colours of a resistor from its value, its tolerance and its temperature coefficient. Three bands, without a tolerance, mean 20 %.',
	examples: [
		{ source: 'bands(4.7 kohm, 5 %)', result: 'yellow violet red gold' },
		{ source: 'bands(38.3 kohm, 1 %, 50 ppm/K)', result: 'orange grey orange red brown red' },
	],
	source: 'IEC 60062:2016',
	count: [1, 3],
	ofEstimate: true,
	type: ([resistance, tolerance, drift]) => {
		expectUnit(resistance, 'ohm', 'The resistance');
		if (tolerance) expectPure(tolerance, 'The tolerance');
		if (drift) expectDrift(drift);
		return { kind: 'text' };
	},
	compute: ([resistance, tolerance, drift]) =>
		answered(
			writeBands(scalar(resistance, 'The resistance'), {
				...(tolerance !== undefined && { tolerance: scalar(tolerance, 'The tolerance') }),
				...(drift !== undefined && { drift: scalar(drift, 'The temperature coefficient') }),
			}),
			{ ohms: 'R' },
		).join(' '),
};
