import { expectSame, refusePoint, scalar, type CalcFunction } from './function';
import { pure } from '../types';
import { nodesOf } from '../traced';

export const atan2: CalcFunction = {
	name: 'atan2',
	signature: 'atan2(y, x)',
	help: 'Angle of the point x, y, in radians.',
	examples: [{ source: 'atan2(1, 1) to deg', result: '45 °' }],
	count: [2, 2],
	type: (args) => {
		const type = expectSame(args, 'Takes the angle of');
		if (args[0]) refusePoint({ ...args[0], type }, 'Takes the angle of');
		return pure;
	},
	compute: ([y, x]) => Math.atan2(scalar(y, 'The first value'), scalar(x, 'The second value')),
	trace: (tape, [a, b]) => ({
		node: tape.binary('atan2', nodesOf(tape, a!)[0]!, nodesOf(tape, b!)[0]!),
	}),
};
