import { Trouble } from '../trouble';
import { spoken } from '../types';
import type { Value } from '../values';
import { Refusal, type Argument } from './function';

/** Throws Trouble unless the value is text in quotes. */
export function expectText(argument: Argument | undefined, what: string, example: string): void {
	if (!argument || argument.type.kind === 'text' || argument.type.kind === 'unknown') return;
	throw new Trouble(
		'dimension',
		argument,
		`${what} is text in quotes, not ${spoken(argument.type)}.`,
		{ mend: `Write \`"${example}"\`, say.` },
	);
}

/** The characters of a text. Throws Refusal for a value that is none. */
export function quoted(value: Value | undefined): string {
	if (typeof value === 'string') return value;
	throw new Refusal('Text in quotes is expected.');
}
