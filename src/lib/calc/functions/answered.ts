import { isRefusal, type Refusal as TableRefusal } from '../tables/refusal';
import { Refusal } from './function';

/** How a signature calls what a table calls otherwise: `{ quantity: 'ratio' }`. */
export type Names = Readonly<Record<string, string>>;

/** The answer of a table. Throws Refusal where it gives none. */
export function answered<T>(answer: T | TableRefusal, names: Names = {}): T {
	if (isRefusal(answer)) throw new Refusal(sentence(answer, names), answer.mend);
	return answer;
}

/** What a table's refusal says, with the name that the function's signature gives the value. */
export function sentence({ message, argument }: TableRefusal, names: Names = {}): string {
	const printed = message.replace(/(?<= )-(?=\d)/g, '\u2212');
	if (argument === undefined) return `${printed}.`;
	const name = `\`${names[argument] ?? argument}\``;
	if (printed.startsWith(`${argument} `)) return `${name}${printed.slice(argument.length)}.`;
	return `${printed.replace(`members of ${argument} `, `members of ${name} `)}.`;
}

/** The names of the values in a signature, `lsb(Vref, bits)`, in their order. */
export function namesOf(signature: string): string[] {
	return signature.slice(signature.indexOf('(')).match(/[A-Za-z]\w*/g) ?? [];
}
