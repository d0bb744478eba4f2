import type { Reference } from './language/nodes';
import type { NoteLine } from './note-lines';
import { Trouble } from './trouble';
import { unknownName, type Suggestions } from './unknown-names';

interface Names {
	definition(name: string): NoteLine | undefined;
	/** Why a use of a line has no value; undefined where it has one. */
	waiting(reference: Reference, used: NoteLine): Trouble | undefined;
	readonly suggestions: Suggestions;
}

/** What is wrong with the names that a line uses: unknown or wrongly used ones first, then those it waits for. */
export function misusedNames(line: NoteLine, names: Names): Trouble[] {
	const found = line.references.flatMap((reference) => {
		const used = names.definition(reference.name);
		if (!used) return unknownName(reference, line, names.suggestions);
		return names.waiting(reference, used) ?? misused(reference, used) ?? [];
	});
	const rank = ({ code }: Trouble) => (code === 'waits' ? 1 : 0);
	return found.sort((a, b) => rank(a) - rank(b));
}

/** The fault of a quantity that is called, or of a function that is not. */
function misused(reference: Reference, used: NoteLine): Trouble | undefined {
	const { typed, called } = reference;
	if (called === (used.kind === 'function')) return undefined;
	if (!called)
		return new Trouble(
			'syntax',
			reference,
			`\`${typed}\` is a function and needs its values in brackets.`,
		);
	return new Trouble('syntax', reference, `\`${typed}\` is a quantity, not a function.`, {
		mend: `Write \`${typed} * (…)\` for a product.`,
		replacement: `${typed} *`,
	});
}
