import { expectSame, refusePoint, type CalcFunction } from './function';
import { gathered } from './gathered';
import { sum } from '../trace-operators';
import { allNodes } from './traced-lists';

export const parallel: CalcFunction = {
	name: 'parallel',
	signature: 'parallel(a, b, …)',
	help: 'Resistance of resistors side by side: 1/(1/a + 1/b + …).',
	examples: [
		{ source: 'parallel(10 kohm, 10 kohm)', result: '5 kΩ' },
		{ source: 'parallel(1 kohm, 2 kohm, 3 kohm)', result: '545.455 Ω' },
	],
	count: [1, Infinity],
	type: (args) => {
		const type = expectSame(args, 'Puts side by side');
		if (args[0]) refusePoint({ ...args[0], type }, 'Puts side by side');
		return type;
	},
	compute: (args) => {
		const all = gathered(args);
		// One short circuit shorts them all.
		return all.includes(0) ? 0 : 1 / all.reduce((sum, value) => sum + 1 / value, 0);
	},
	trace: (tape, args) => {
		const one = tape.constant(1);
		const conductances = allNodes(tape, args).map((node) => tape.binary('div', one, node));
		return { node: tape.binary('div', one, sum(tape, conductances)) };
	},
};
