import { expectSame, refusePoint, scalar, type CalcFunction } from './function';
import { nodesOf } from '../traced';

export const mod: CalcFunction = {
	name: 'mod',
	signature: 'mod(a, b)',
	help: 'Remainder of a divided by b; it has the sign of b.',
	examples: [
		{ source: 'mod(5, 3)', result: '2' },
		{ source: 'mod(7 mV, 2 mV)', result: '1 mV' },
	],
	count: [2, 2],
	type: (args) => {
		const type = expectSame(args, 'Takes the remainder of');
		if (args[0]) refusePoint({ ...args[0], type }, 'Takes the remainder of');
		return type;
	},
	compute: ([a, b]) => {
		const [x, y] = [scalar(a, 'The first value'), scalar(b, 'The second value')];
		return y === 0 ? x : x - y * Math.floor(x / y);
	},
	trace: (tape, [a, b]) => ({
		node: tape.binary('mod', nodesOf(tape, a!)[0]!, nodesOf(tape, b!)[0]!),
	}),
};
