import { expect, test } from 'vitest';
import type { Evaluation, Quantity } from '$lib/calc/results';
import { registerOf } from './register';

const at = (cell: string, line: number) => ({ cell, line }) as Quantity;

test('the register follows the sheet, not the names', () => {
	const cells = ['b', 'a'].map((id) => ({ id, kind: 'calculation' as const, source: '' }));
	const evaluation = {
		quantities: { A: at('a', 1), Z: at('b', 2), Vmax: at('b', 1), gone: at('x', 1) },
	} as unknown as Evaluation;
	expect(registerOf(cells, evaluation).map(([name]) => name)).toEqual(['Vmax', 'Z', 'A', 'gone']);
});
