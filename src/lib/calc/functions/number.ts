import { expectNumber, type CalcFunction } from './function';
import { Trouble } from '../trouble';
import { mapNodes, nodesOf } from '../traced';
import { differ, pure, spoken } from '../types';
import { map } from '../values';

export const number: CalcFunction = {
	name: 'number',
	signature: 'number(x, unit)',
	help: 'The pure number of a value in a unit.',
	examples: [{ source: 'number(2.5 V, mV)', result: '2500' }],
	count: [2, 2],
	unitAt: 1,
	type: ([x, unit]) => {
		if (x) expectNumber(x, 'Takes the number of');
		if (unit && !unit.unit)
			throw new Trouble('syntax', unit, 'The second value is a unit.', {
				mend: 'Write `number(x, mV)`, say.',
			});
		if (x && unit && differ(x.type, unit.type))
			throw new Trouble(
				'dimension',
				x,
				`Takes the number of ${spoken(x.type)} in ${unit.unit?.label ?? ''}.`,
			);
		return pure;
	},
	compute: ([x = 0, unit = 1]) => map(x, (number) => number / Number(unit)),
	trace: (tape, [x, unit]) => {
		const [size] = nodesOf(tape, unit!);
		return mapNodes(tape, x!, (node) => tape.binary('div', node, size!));
	},
};
