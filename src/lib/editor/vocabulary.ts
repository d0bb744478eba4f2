import type { Vocabulary } from '$lib/calc/language/vocabulary';

let loading: Promise<Vocabulary> | undefined;
let ready: Vocabulary | undefined;

const none: Vocabulary = { functions: {}, units: {}, constants: {}, series: {}, words: {} };

/** The words of the formula language, fetched when they are wanted first. Without a connection there are none yet. */
export function vocabulary(): Promise<Vocabulary> {
	loading ??= import('$lib/calc/language/vocabulary.json').then(
		(loaded) => (ready = loaded.default as Vocabulary),
		() => {
			loading = undefined;
			return none;
		},
	);
	return loading;
}

/** The words as far as they are there: none before they are fetched. */
export function vocabularyNow(): { words: Vocabulary; complete: boolean } {
	return { words: ready ?? none, complete: ready !== undefined };
}

/** The unit that a word stands for behind a number: `kohm`, `kΩ`, `µA`, `°C`, `volts`. */
export function unitOf(
	{ units }: Vocabulary,
	typed: string,
): { label: string; name: string } | undefined {
	const plain = typed
		.replace(/^[\u00b5\u03bc](?=.)/, 'u')
		.replace(/[\u03a9\u2126]$|Ohms?$/, 'ohm')
		.replace(/^°(?=[CF]?$)/, 'deg');
	if (Object.hasOwn(units, plain)) return units[plain];
	return Object.values(units).find(({ name }) => name === plain || `${name}s` === plain);
}

/** Why a word cannot be the name of a quantity, a sentence; undefined where it can. */
export function whyTaken(words: Vocabulary, name: string): string | undefined {
	if (!/^[\p{L}][\p{L}\p{N}_]*$/u.test(name))
		return 'A name is made of letters, digits and underscores, and begins with a letter.';
	const unit = unitOf(words, name);
	if (unit) return `${name} is the unit ${unit.name}.`;
	if (Object.hasOwn(words.functions, name)) return `${name} is a function.`;
	if (Object.hasOwn(words.constants, name)) return `${name} is a constant.`;
	if (Object.hasOwn(words.series, name)) return `${name} is a series of preferred values.`;
	if (Object.hasOwn(words.words, name)) return `${name} is a word of the formula language.`;
	return undefined;
}
