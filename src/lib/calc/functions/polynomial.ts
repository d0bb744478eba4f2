import { polynomial as table, refusePolynomial } from '../tables/polynomial';
import { Trouble } from '../trouble';
import { ofDimension, pure, spoken, unknown, type Type } from '../types';
import { over, raised, same, times } from '../units/dimension';
import { expectNumber, refusePoint, type Argument } from './function';
import { tabled } from './tabled';

/** The type that every term has: of c1 x, c2 x² and so on as of c0. */
function termType(x: Argument, coefficients: Argument[]): Type {
	expectNumber(x, 'A polynomial takes');
	refusePoint(x, 'Raises');
	coefficients.forEach((coefficient, k) => {
		expectNumber(coefficient, 'A coefficient takes');
		if (k > 0) refusePoint(coefficient, 'Multiplies');
	});
	const of = x.type.dimension;
	if (!of) return coefficients[0]?.type ?? unknown;
	let term: Type | undefined;
	for (const [k, { type, ...at }] of coefficients.entries()) {
		if (!type.dimension) continue;
		const dimension = times(type.dimension, raised(of, k));
		term ??= k === 0 ? type : ofDimension(dimension);
		if (same(dimension, term.dimension ?? dimension)) continue;
		const wanted = ofDimension(over(term.dimension ?? dimension, raised(of, k)));
		throw new Trouble(
			'dimension',
			at,
			`The coefficient of x${k > 1 ? `^${k}` : ''} is in ${spoken(wanted)} here, not ${spoken(type)}.`,
		);
	}
	return term ?? unknown;
}

export const polynomial = tabled({
	name: 'polynomial',
	signature: 'polynomial(x, c0, c1, …)',
	help: 'The sum c0 + c1 x + c2 x² + …, each coefficient with the unit that makes its term fit.',
	examples: [
		{ source: 'polynomial(2, 1, 0, 3)', result: '13' },
		{ source: 'polynomial(1.2 V, 0 degC, 100 K/V)', result: '120 °C' },
	],
	count: [2, Infinity],
	type: ([x, ...coefficients]) => (x ? termType(x, coefficients) : pure),
	answer: ([x, ...coefficients]) => {
		const numbers = coefficients.map(Number);
		const fault = refusePolynomial(Number(x), numbers);
		if (fault) return fault;
		const { value, derivative } = table(Number(x), numbers);
		return { value, derivatives: [derivative, ...numbers.map((_, k) => Number(x) ** k)] };
	},
	effort: (args) => args.length,
});
