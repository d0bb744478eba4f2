import { linear, monotoneCubic, type Interpolation } from '../tables/interpolation';
import { Trouble } from '../trouble';
import { differ, pure, spoken } from '../types';
import { isGrid, map, type Grid, type Value } from '../values';
import { answered } from './answered';
import { expectNumber, Refusal, scalar, type CalcFunction } from './function';
import { expectText, quoted } from './quoted';

const ways = { linear, cubic: monotoneCubic };

/** The table that was last made of a list of places; trials ask for one many times over. */
const made = new WeakMap<Grid, { ys: Grid; way: string; table: Interpolation }>();

function tableOf([, xs = 0, ys = 0, word = 'linear']: Value[]): Interpolation {
	if (!isGrid(xs) || !isGrid(ys) || xs.shape.length > 1 || ys.shape.length > 1)
		throw new Refusal('The second and the third value are lists.', 'Write `[0, 10, 20] V`, say.');
	const way = quoted(word);
	if (way !== 'linear' && way !== 'cubic')
		throw new Refusal('Points are joined by straight lines or by cubics.', 'Write `"cubic"`.');
	const known = made.get(xs);
	if (known?.ys === ys && known.way === way) return known.table;
	const table = answered(ways[way]([...xs.data], [...ys.data]));
	made.set(xs, { ys, way, table });
	return table;
}

export const interpolate: CalcFunction = {
	name: 'interpolate',
	signature: 'interpolate(x, xs, ys[, "cubic"])',
	help: 'Value of a table at x: on the straight line between its neighbours, or on a cubic that rises and falls only where the table does. Nothing is assumed beyond its ends.',
	examples: [
		{ source: 'interpolate(2.5 V, [1, 2, 3] V, [10, 20, 40] mA)', result: '30 mA' },
		{ source: 'interpolate(1.5 V, [0, 1, 2] V, [0, 1, 4] V, "cubic")', result: '2.1875 V' },
	],
	source: 'Fritsch and Butland, SIAM J. Sci. Stat. Comput. 5 (1984), 300–304, for cubics',
	count: [3, 4],
	type: ([x, xs, ys, word]) => {
		for (const argument of [x, xs, ys]) if (argument) expectNumber(argument, 'Looks up');
		expectText(word, 'How points are joined', 'cubic');
		if (x && xs && differ(x.type, xs.type))
			throw new Trouble(
				'dimension',
				x,
				`Looks up ${spoken(x.type)} in a table over ${spoken(xs.type)}.`,
			);
		return ys?.type ?? pure;
	},
	cost: ([, xs]) => (isGrid(xs ?? 0) ? 10 : 0),
	compute: (args) => {
		const table = tableOf(args);
		return map(args[0] ?? 0, (x) => answered(table(x)).value);
	},
	slopes: (args) => {
		const { derivative } = answered(tableOf(args)(scalar(args[0], 'The place')));
		return args.map((_, i) => (i === 0 ? derivative : 0));
	},
};
