import {
	expectNumber,
	expectSame,
	Refusal,
	refusePoint,
	scalar,
	type CalcFunction,
} from './function';
import { map } from '../values';
import type { Node } from '../doubt/tape';
import { mapNodes, nodesOf } from '../traced';

function loaded(arm: number, load: number): number {
	return arm === 0 || load === 0 ? 0 : (arm * load) / (arm + load);
}

export const divider: CalcFunction = {
	name: 'divider',
	signature: 'divider(Vin, Rupper, Rlower[, Rload])',
	help: 'Output of a voltage divider, with the load on its lower arm where one is given.',
	examples: [
		{ source: 'divider(15 V, 100 kohm, 27 kohm)', result: '3.188 98 V' },
		{ source: 'divider(10 V, 10 kohm, 10 kohm, 10 kohm)', result: '3.333 33 V' },
	],
	count: [3, 4],
	type: ([input, ...arms]) => {
		const type = expectSame(arms, 'Divides by');
		if (arms[0]) refusePoint({ ...arms[0], type }, 'Divides by');
		if (!input) return type;
		expectNumber(input, 'Divides');
		refusePoint(input, 'Divides');
		return input.type;
	},
	compute: ([input = 0, upper, lower, load]) => {
		const above = scalar(upper, 'The upper arm');
		const arm = scalar(lower, 'The lower arm');
		const below = load === undefined ? arm : loaded(arm, scalar(load, 'The load'));
		if (above + below === 0) throw new Refusal('Both arms are zero.');
		return map(input, (voltage) => (voltage * below) / (above + below));
	},
	trace: (tape, [input, ...arms]) => {
		const [above, arm, load] = arms.map((each) => nodesOf(tape, each)[0]!);
		const sum = (x: Node, y: Node) => tape.binary('add', x, y);
		const product = (x: Node, y: Node) => tape.binary('mul', x, y);
		const below =
			load === undefined ? arm! : tape.binary('div', product(arm!, load), sum(arm!, load));
		const ratio = tape.binary('div', below, sum(above!, below));
		return mapNodes(tape, input!, (voltage) => product(voltage, ratio));
	},
};
