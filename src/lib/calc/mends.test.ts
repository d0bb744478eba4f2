import { expect, test } from 'vitest';
import { evaluate } from './evaluate';

const faultsOf = (source: string) =>
	evaluate([{ id: 'c', kind: 'calculation', source }], { coverage: 0.95, decisionRule: 'guarded' })
		.errors;

test.each([
	['x = sqrt(4 + max(1, 2)  # root', 'x = sqrt(4 + max(1, 2))  # root'],
	['x = [1, 2', 'x = [1, 2]'],
	['x = 2 * 3)', 'x = 2 * 3'],
	['x = 4,7', 'x = 4.7'],
	['x = 3 ≤ 4', 'x = 3 <= 4'],
	['x = 3²', 'x = 3^2'],
	['x = 10⁻³', 'x = 10^-3'],
	['x = {2}', 'x = (2)'],
	['x = sqr(4)', 'x = sqrt(4)'],
])('%j is mended to %j by its replacements alone', (wrong, right) => {
	let source = wrong;
	for (let step = 0; step < 3; step++) {
		const [fault] = faultsOf(source);
		if (fault?.replacement === undefined) break;
		const { from, to } = fault.replaces ?? fault;
		source = source.slice(0, from) + fault.replacement + source.slice(to);
	}
	expect(source).toBe(right);
	expect(faultsOf(source)).toEqual([]);
});

test.each(['x = f(1, 2,)', 'x = 3 ± 1', 'x = (1 + '])(
	'%j, which could be meant in more than one way, is left to the writer',
	(source) => {
		const [fault] = faultsOf(source);
		expect(fault).toBeDefined();
		expect(fault?.replacement === undefined || fault.replacement === ')').toBe(true);
	},
);

test('a quantity that wants another name says which, for all its uses', () => {
	expect(faultsOf('V = 3 V')[0]?.rename).toEqual({ from: 'V', to: 'Vin' });
	expect(faultsOf('C = 10 nF\ny = 5 C').find(({ rename }) => rename)?.rename).toMatchObject({
		from: 'C',
	});
});
