import * as readings from '../curves/univariate';
import { isRefusal } from '../tables/refusal';
import { expectSame, refusePoint, type CalcFunction } from './function';
import { gathered } from './gathered';
import { folded } from './traced-lists';

export const sum: CalcFunction = {
	name: 'sum',
	signature: 'sum(a, b, …)',
	help: 'The sum.',
	examples: [{ source: 'sum([1, 2, 3] mA)', result: '6 mA' }],
	count: [1, Infinity],
	type: (args) => {
		const type = expectSame(args, 'Adds');
		if (args[0]) refusePoint({ ...args[0], type }, 'Adds');
		return type;
	},
	compute: (args) => {
		const all = Array.from(gathered(args));
		const total = readings.sum(all);
		// What is beyond all numbers is refused as every other result of that kind.
		return isRefusal(total) ? all.reduce((a, b) => a + b, 0) : total;
	},
	trace: (tape, args) => folded(tape, args, 'add'),
};
