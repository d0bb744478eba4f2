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
	if (argument === undefined) return `${message}.`;
	const name = `\`${names[argument] ?? argument}\``;
	const named = message.startsWith(`${argument} `)
		? name + message.slice(argument.length)
		: message.replace(`members of ${argument} `, `members of ${name} `);
	return `${named}.`;
}

/** The names of the values in a signature, `lsb(Vref, bits)`, in their order. */
export function namesOf(signature: string): string[] {
	return signature.slice(signature.indexOf('(')).match(/[A-Za-z]\w*/g) ?? [];
}
