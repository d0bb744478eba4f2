import type { Formula } from './sheet';

type Words = Readonly<Record<string, string>>;

const operators: Words = { add: '+', sub: '-', mul: '*', div: '/' };
const ofLanguage: Words = { ...operators, pow: '^', powi: '^' };
const ofPython: Words = { ...operators, pow: '**', powi: '**' };
/** What Python's package has no word for. */
const spelled: Words = { log2: '(log(_) / log(2))', cbrt: '((_)**(1 / 3))' };

/** A formula as it is typed in the language. */
export function inLanguage(formula: Formula): string {
	return text(formula, ofLanguage, {});
}

/** The same for Python. */
export function inPython(formula: Formula): string {
	return text(formula, ofPython, spelled);
}

function text(formula: Formula, signs: Words, others: Words): string {
	if (typeof formula === 'number') return `(${formula})`;
	if (typeof formula === 'string') return formula;
	const [operation, ...parts] = formula;
	const [first = '', second = ''] = parts.map((part) => text(part, signs, others));
	const sign = signs[operation];
	if (sign !== undefined) return `(${first} ${sign} ${second})`;
	if (operation === 'neg') return `(-${first})`;
	const other = others[operation];
	if (other !== undefined) return other.replace('_', () => first);
	return `${operation}(${second === '' ? first : `${first}, ${second}`})`;
}
