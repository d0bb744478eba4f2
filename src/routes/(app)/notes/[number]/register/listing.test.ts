import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { entriesOf, narrowed, type Kind, type Order } from './listing';
import { whereUsed } from './where-used';

const cells = [
	{
		id: 't',
		kind: 'text' as const,
		source: 'The divider gives {{Vout}},\nnever {{Vout}} and {{Vin}}.',
	},
	{
		id: 'c',
		kind: 'calculation' as const,
		source: [
			'Vin = 10 V # from the battery',
			'R2 = tolerance(1 kohm, 1 %)',
			'R10 = 3 kohm',
			'gain(x) = x / 2',
			'Vout = Vin * R2 / (R2 + R10)',
			'broken = Vin + R2',
			'later = broken * 2',
		].join('\n'),
	},
	{ id: 'r', kind: 'requirement' as const, source: 'Vout <= 2 V\nVin <= 12 V\nR2 >= 1 kohm' },
];
const entries = entriesOf(cells, evaluate(cells, defaultOptions));
const names = (typed = '', kind: Kind = 'all', order: Order = 'sheet') =>
	narrowed(entries, { typed, kind, order }).map(({ name }) => name);

test('the register is narrowed by name, comment, unit and kind', () => {
	expect(names()).toEqual(['Vin', 'R2', 'R10', 'Vout', 'broken', 'later']);
	expect(names('v')).toEqual(['Vin', 'Vout']);
	expect(names('battery')).toEqual(['Vin']);
	expect(names('kΩ')).toEqual(['R2', 'R10']);
	expect(names('vout x')).toEqual([]);
	expect(names('', 'inputs')).toEqual(['Vin', 'R2', 'R10']);
	expect(names('', 'results')).toEqual(['Vout']);
	expect(names('', 'in doubt')).toEqual(['R2', 'Vout']);
	expect(names('', 'not met')).toEqual(['Vout']);
	expect(names('', 'undecided')).toEqual(['R2']);
	expect(names('', 'no value')).toEqual(['broken', 'later']);
});

test('the register is sorted by name, numbers as numbers, and by what wants attention', () => {
	expect(names('', 'all', 'name')).toEqual(['broken', 'later', 'R2', 'R10', 'Vin', 'Vout']);
	expect(names('', 'all', 'state')).toEqual(['broken', 'later', 'Vout', 'R2', 'Vin', 'R10']);
});

test('where a quantity is used is told once for each line', async () => {
	const places = async (name: string) =>
		(await whereUsed(cells, name)).map(({ terminal, line, kind }) => `${terminal}:${line} ${kind}`);
	expect(await places('Vout')).toEqual(['1:1 text', '1:2 text', '3:1 requirement']);
	expect(await places('Vin')).toEqual([
		'1:2 text',
		'2:5 calculation',
		'2:6 calculation',
		'3:2 requirement',
	]);
	expect(await places('later')).toEqual([]);
});
