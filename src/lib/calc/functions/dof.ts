import { withDof } from '../doubt/distributions/shapes';
import { pure } from '../types';
import { expectNumber, expectPure, type CalcFunction } from './function';

export const dof: CalcFunction = {
	name: 'dof',
	signature: 'dof(x, n)',
	help: 'The same quantity, its uncertainty known with n degrees of freedom. It stands around the function that states x.',
	examples: [{ source: 'dof(normal(10 V, 10 mV), 4)', result: '10.000 V ± 0.028 V' }],
	source: 'JCGM 100:2008, G.4.2',
	count: [2, 2],
	type: ([x, n]) => {
		if (!x) return pure;
		expectNumber(x, 'States the degrees of freedom of');
		if (n) expectPure(n, 'The number of degrees of freedom');
		return x.type;
	},
	compute: ([x = 0]) => x,
	restates: (distribution, [, n]) => withDof(distribution, Number(n)),
};
