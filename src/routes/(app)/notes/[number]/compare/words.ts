import type { Comparison, Side } from '$lib/schemas/comparison';

const small = [
	'No',
	'One',
	'Two',
	'Three',
	'Four',
	'Five',
	'Six',
	'Seven',
	'Eight',
	'Nine',
	'Ten',
	'Eleven',
	'Twelve',
];

/** "Two inputs changed. Four results moved, one verdict turned." Starts from what is the cause of the rest. */
export function summary({
	inputs,
	results,
	formulas,
	requirements,
	texts,
	title,
}: Comparison): string {
	const turned = requirements.filter((one) => one.turned).length;
	const changed = formulas.filter(({ moved, change }) => moved || change !== 'changed').length;
	const causes = [
		...(inputs.length > 0 ? [counted(inputs.length, 'input') + ' changed'] : []),
		...(changed > 0 ? [counted(changed, 'formula') + ' changed'] : []),
	];
	const effects = [
		...(results.length > 0 ? [counted(results.length, 'result') + ' moved'] : []),
		...(turned > 0 ? [counted(turned, 'verdict') + ' turned'] : []),
	];
	if (causes.length + effects.length > 0) {
		const none = effects.length === 0 ? ['No result moved'] : [sentence(effects)];
		return [...(causes.length > 0 ? [sentence(causes)] : ['No input changed']), ...none]
			.map((one) => `${one}.`)
			.join(' ');
	}
	if (texts.length === 0 && !title) return 'Both sides say the same, and give the same figures.';
	return `No figure moved. ${counted(texts.length + (title ? 1 : 0), 'text')} changed.`;
}

/** "One result", "14 results". */
function counted(count: number, noun: string): string {
	return `${small[count] ?? count} ${noun}${count === 1 ? '' : 's'}`;
}

function sentence(parts: readonly string[]): string {
	const [first = '', ...rest] = parts;
	return [first, ...rest.map((part) => part.charAt(0).toLowerCase() + part.slice(1))].join(', ');
}

/** Where a side is read; undefined where it has no page of its own. */
export function addressOf(
	number: string,
	side: Side,
	newest: Side | undefined,
): string | undefined {
	if (side.kind === 'revision') return `/notes/${number}/revisions/${side.key}`;
	if (side.kind === 'working copy') return `/notes/${number}`;
	return side.key === newest?.key ? `/notes/${number}/candidate` : undefined;
}

/** A side's name within a sentence: only its first letter changes, a revision keeps its own. */
export function inSentence(label: string): string {
	return label.charAt(0).toLowerCase() + label.slice(1);
}

/** The address of a comparison. */
export function comparing(number: string, from: Side, to: Side, view = 'columns'): string {
	const query = new URLSearchParams({ from: from.key, to: to.key });
	if (view !== 'columns') query.set('view', view);
	return `/notes/${number}/compare?${query.toString()}`;
}
