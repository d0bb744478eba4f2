import { builtInNames, nearest, unitNames } from './language/names';
import type { Reference } from './language/nodes';
import type { NoteLine } from './note-lines';
import { Trouble } from './trouble';

/** Names that wrong ones may have meant. Comparing takes time: only the first wrong ones of a note get one. */
export class Suggestions {
	#left = 25;
	readonly #known: readonly string[];

	constructor(known: readonly string[]) {
		this.#known = known.slice(0, 1_000);
	}

	/** The likeliest of the note's names and others; undefined where none is near. */
	nearest(typed: string, others: Iterable<string>): string | undefined {
		if (this.#left === 0 || typed.length > 60) return undefined;
		this.#left -= 1;
		const names = [...others, ...this.#known].filter((name) => name !== typed);
		return nearest(typed, names);
	}
}

/** The fault of a name that nothing in the note defines. */
export function unknownName(
	{ typed, called, from, to }: Reference,
	line: NoteLine,
	suggestions: Suggestions,
): Trouble {
	const before = line.text.slice(0, from);
	const behindNumber = /\d\s*$/.test(before);
	const message = called ? `There is no function \`${typed}\`.` : `\`${typed}\` is not defined.`;
	const code = /^([kMGmRunp\u00b5])(\d+)$/.exec(typed);
	if (behindNumber && code) {
		const number = `${/\d+\s*$/.exec(before)?.[0].trim() ?? ''}.${code[2] ?? ''}`;
		const mend = `Write the decimal mark and the unit: \`${number} ${code[1] === 'R' ? '' : (code[1] ?? '')}ohm\`, say.`;
		return new Trouble('unknownName', { from, to }, message, { mend });
	}
	if (behindNumber && /^[kMGmunp\u00b5]$/.test(typed))
		return new Trouble('unknownName', { from, to }, message, {
			mend: `A prefix needs its unit: \`${typed}ohm\` or \`${typed}V\`, say.`,
		});
	const own = line.parameters.map((parameter) => parameter.typed);
	const near = suggestions.nearest(typed, [
		...own,
		...builtInNames(),
		...(behindNumber ? unitNames() : []),
	]);
	return new Trouble(
		'unknownName',
		{ from, to },
		message,
		near === undefined ? {} : { mend: `Did you mean \`${near}\`?`, replacement: near },
	);
}
