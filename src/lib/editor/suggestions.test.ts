import { expect, test } from 'vitest';
import { vocabulary as words } from '$lib/calc/language/vocabulary';
import { evaluate } from '$lib/calc/evaluate';
import type { NoteCell } from '$lib/note/document';
import { factOf, wordAt } from './facts';
import { suggestionsAt } from './suggestions';
import { unitOf, whyTaken } from './vocabulary';

const cells: NoteCell[] = [
	{
		id: 'a',
		kind: 'calculation',
		source: 'Vmax = 32 V # highest input\nR1 = 470 kohm\nhalf(x) = x / 2\nwrong = Vmax + R1',
	},
	{ id: 'b', kind: 'text', source: 'It is {{Vmax}}.' },
];
const evaluation = evaluate(cells, { coverage: 0.95, decisionRule: 'guarded' });
const known = { cells, evaluation, words: words() };

/** What is offered where `|` stands. */
function offered(typed: string, kind: NoteCell['kind'] = 'calculation', asked = false) {
	const [before = '', after = ''] = typed.split('|');
	const found = suggestionsAt({ ...known, kind, before, line: before + after, asked });
	return { from: found?.from, names: found?.list.map(({ name }) => name) ?? [], list: found?.list };
}

test('in a formula the names of the note come first, with their values, then functions and constants', () => {
	const { from, names, list } = offered('y = 2 * V|');
	expect(from).toBe(8);
	expect(names.slice(0, 4)).toEqual(['Vmax', 'R1', 'half', 'wrong']);
	expect(list?.[0]?.detail).toBe('32 V');
	expect(list?.find(({ name }) => name === 'half')).toMatchObject({ detail: '(x)', ending: '(' });
	expect(names).toContain('divider');
	expect(names).toContain('boltzmann');
	expect(names).toContain('E24');
	expect(names).not.toContain('kohm');
});

test('behind a number units are offered, as they are printed', () => {
	const { names, list } = offered('y = 4.7 ko|');
	expect(names).toContain('kohm');
	expect(names).not.toContain('divider');
	expect(list?.find(({ name }) => name === 'kohm')).toMatchObject({
		label: 'kΩ',
		detail: 'kiloohm',
	});
	expect(offered('y = 4.7 |', 'calculation', true).names).toContain('uV');
	expect(offered('y = R1 to k|').names).toContain('kohm');
	expect(offered('y = 5 mV / deg|').names).toContain('degC');
});

test('nothing is offered where a new name, a comment or a text in quotes is written, unless it is asked for', () => {
	expect(offered('Vm|').names).toEqual([]);
	expect(offered('y = 1 # Vm|').names).toEqual([]);
	expect(offered('R = rkm("4k|')).toMatchObject({ names: [] });
	expect(offered('y = |').names).toEqual([]);
	expect(offered('Vm|', 'calculation', true).names).toContain('Vmax');
	expect(offered('Vm|', 'requirement').names).toContain('Vmax');
});

test('a line offers the values of its own function and not itself', () => {
	expect(offered('f(load) = lo|').names[0]).toBe('load');
	expect(offered('Vmax = 2 * V|').names).not.toContain('Vmax');
});

test('a text offers names between braces and units behind the colon', () => {
	expect(offered('It is {{V|', 'text').list?.[0]).toMatchObject({ name: 'Vmax', ending: '}}' });
	expect(offered('It is {{V|}} high', 'text').list?.[0]).toMatchObject({ ending: '' });
	expect(offered('It is {{Vmax: m|', 'text').names).toContain('mV');
	expect(offered('It is Vm|', 'text').names).toEqual([]);
	expect(offered('It is {{Vmax}} and V|', 'text').names).toEqual([]);
});

const factAt = (source: string, at: number, kind: NoteCell['kind'] = 'calculation') => {
	const found = wordAt(kind, source, at);
	return found && factOf(found, known);
};

test('a name says its value, formula, comment and place, from wherever it is used', () => {
	const fact = factAt('y = 2 * Vmax', 10);
	expect(fact).toMatchObject({
		what: 'quantity',
		formula: '32 V',
		about: 'highest input',
		definition: { terminal: 1, line: 1, from: 0, to: 4 },
	});
	expect(fact?.value).toMatch(/^32\sV$/);
	expect(factAt('It is {{ Vmax : mV }}', 10, 'text')).toMatchObject({ name: 'Vmax' });
	expect(factAt('y = wrong', 6)).not.toHaveProperty('value');
	expect(factAt('y = half(2)', 6)).toMatchObject({
		what: 'function of this note',
		value: 'half(x)',
	});
});

test('functions, constants, units and values of a function say what they are', () => {
	expect(factAt('y = divider(1, 2, 3)', 5)).toMatchObject({
		what: 'function',
		value: 'divider(Vin, Rupper, Rlower[, Rload])',
		example: { source: 'divider(15 V, 100 kohm, 27 kohm)', result: '3.188 98 V' },
	});
	expect(factAt('y = boltzmann', 5)).toMatchObject({ what: 'constant' });
	expect(factAt('y = 4.7 kΩ', 9)).toMatchObject({ what: 'unit', about: 'kiloohm' });
	expect(factAt('f(Vmax) = Vmax + 1', 12)).toMatchObject({
		what: 'value that this function is given',
	});
	expect(factAt('y = nothing', 6)).toBeUndefined();
	expect(factAt('y = 1', 2)).toBeUndefined();
});

test.each(['kohm', 'kΩ', 'µA', 'uA', '°C', '°', 'volt', 'volts', 'Ohm', '%'])(
	'%s is a unit however it is typed',
	(typed) => expect(unitOf(known.words, typed)).toBeDefined(),
);

test.each([
	['V', /unit volt/],
	['divider', /function/],
	['pi', /constant/],
	['E24', /series/],
	['to', /word of the formula language/],
	['2x', /begins with a letter/],
	['a b', /letters/],
	['', /letters/],
])('%j cannot be the name of a quantity, and it is said why', (name, why) => {
	expect(whyTaken(known.words, name)).toMatch(why);
});

test('a free name is taken', () => expect(whyTaken(known.words, 'V_ref')).toBeUndefined());

test('in the line of a curve names are offered, the word that comes next, and units within the range', () => {
	const at = (typed: string) => offered(typed, 'curve').names;
	expect(at('V|')).toEqual(['Vmax', 'R1', 'wrong']);
	expect(at('R1 o|').slice(0, 1)).toEqual(['over']);
	expect(at('R1 over V|')).not.toContain('half');
	expect(at('R1 over Vmax f|').slice(0, 1)).toEqual(['from']);
	expect(at('R1 over Vmax from 0 V t|')).toEqual(['to']);
	expect(at('R1 over Vmax from 0 k|')).toContain('kV');
	expect(at('R1 over Vmax from 0 V to 40 V lo|')).toEqual(['logarithmic']);
	expect(at('R1 over Vmax from 0 V to Vm|')).toContain('Vmax');
	expect(at('R1 over Vmax # V|')).toEqual([]);
});
