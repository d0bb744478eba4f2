import { describe, expect, test } from 'vitest';
import { splitLine, tokenize } from './lines';

const cut = (text: string) => {
	const line = splitLine(text);
	return {
		kind: line.kind,
		name: text.slice(line.nameFrom, line.nameTo),
		formula: text.slice(line.formulaFrom, line.formulaTo),
		comment: text.slice(line.commentFrom),
	};
};

describe('splitting a line', () => {
	test('a definition has a name, a formula and a comment', () => {
		expect(cut('Vmax = 32 V  # top of range')).toEqual({
			kind: 'definition',
			name: 'Vmax',
			formula: '32 V',
			comment: '# top of range',
		});
	});

	test('a name may be a Greek sign, indented and pressed against its equals sign', () => {
		expect(cut('  δ_gain=0.15 %')).toMatchObject({ name: 'δ_gain', formula: '0.15 %' });
	});

	test('a function keeps its parameters out of the name', () => {
		expect(cut('drop(I, R) = I * R')).toMatchObject({
			kind: 'function',
			name: 'drop',
			formula: 'I * R',
		});
	});

	test.each(['Vadc <= 2 V', 'a == b', 'a >= b', 'a != b', 'f(x) + 1'])(
		'%s is an expression, not a definition',
		(text) => {
			expect(cut(text)).toMatchObject({ kind: 'expression', name: '', formula: text });
		},
	);

	test('a number sign starts a comment also inside a quoted text, as the engine reads it', () => {
		expect(cut('R = rkm("4#7") # real')).toMatchObject({
			formula: 'rkm("4',
			comment: '#7") # real',
		});
	});

	test('comments and blanks are told apart', () => {
		expect(cut('# parts').kind).toBe('comment');
		expect(cut('   ').kind).toBe('blank');
		expect(cut('').kind).toBe('blank');
	});

	test('a definition that still lacks its formula ends where it starts', () => {
		expect(cut('Vmax = ')).toMatchObject({ kind: 'definition', name: 'Vmax', formula: '' });
	});
});

describe('cutting a formula into colours', () => {
	const pieces = (text: string) =>
		tokenize(text).flatMap((token) => (token.kind === 'plain' ? [] : [[token.kind, token.text]]));

	test('calls, names, numbers with their units and comments are found', () => {
		expect(pieces('preferred(R2exact, 470 kohm) # why')).toEqual([
			['call', 'preferred'],
			['name', 'R2exact'],
			['number', '470'],
			['unit', 'kohm'],
			['comment', '# why'],
		]);
	});

	test.each([
		['0.1 %', 'unit'],
		['20 °C', 'unit'],
		['4.7kΩ', 'unit'],
		['2 * kohm', 'name'],
		['x * 2 + R', 'name'],
	])('the last word of %j is a %s', (text, kind) => {
		expect(tokenize(text).at(-1)?.kind).toBe(kind);
	});

	test.each(['Vmax * R2 / (R1 + R2)', '1.5e-3 A', '"a # b" # c', '', '{{x}}', "'open"])(
		'the pieces of %j joined are the text',
		(text) => {
			expect(
				tokenize(text)
					.map((token) => token.text)
					.join(''),
			).toBe(text);
		},
	);
});
