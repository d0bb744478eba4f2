import { whyReserved } from './language/names';
import { whereabouts, type NoteLine } from './note-lines';
import { leftOut } from './order';
import { Trouble } from './trouble';
import { findSymbol, spokenName } from './units/table';

/** Names that were found to be free; whether one is depends on nothing but the name. */
const freeNames = new Set<string>();

function remember(typed: string): void {
	if (freeNames.size > 20_000) freeNames.clear();
	freeNames.add(typed);
}

/** The lines that define names. Later definitions of a name and names that are not free are reported. */
export function define(
	lines: readonly NoteLine[],
	names: ReadonlySet<string>,
	fail: (line: NoteLine, trouble: Trouble) => void,
): Map<string, NoteLine> {
	const definitions = new Map<string, NoteLine>();
	for (const line of lines) {
		const { defined } = line;
		if (!defined || line.requirement) continue;
		const first = definitions.get(defined.name);
		if (first) {
			const named =
				first.defined?.typed === defined.typed
					? `\`${defined.typed}\``
					: `\`${defined.typed}\`, the same name as \`${first.defined?.typed ?? ''}\`,`;
			fail(
				line,
				new Trouble('duplicate', defined, `${named} is already defined in ${whereabouts(first)}.`, {
					mend: 'Give one of the two another name.',
				}),
			);
			continue;
		}
		definitions.set(defined.name, line);
		const reserved = freeNames.has(defined.typed) ? undefined : whyReserved(defined.typed, names);
		if (!reserved) remember(defined.typed);
		if (reserved)
			fail(
				line,
				new Trouble('reserved', defined, reserved.message, {
					mend: `Call the quantity \`${reserved.suggestion}\`, say.`,
					replacement: reserved.suggestion,
					rename: { from: defined.typed, to: reserved.suggestion },
				}),
			);
		for (const [i, parameter] of line.parameters.entries()) {
			const why = whyReserved(parameter.typed, names);
			if (why)
				fail(
					line,
					new Trouble('reserved', parameter, why.message, {
						mend: `Call it \`${why.suggestion}\`, say.`,
					}),
				);
			if (line.parameters.findIndex((p) => p.name === parameter.name) !== i)
				fail(
					line,
					new Trouble(
						'duplicate',
						parameter,
						`\`${parameter.typed}\` is already a value of this function.`,
					),
				);
		}
	}
	return definitions;
}

/** `C = 10 nF`, then `5 C`: the unit is meant, but a reader may take it for the quantity. */
export function doubleReadings(
	lines: readonly NoteLine[],
	definitions: ReadonlyMap<string, NoteLine>,
	names: ReadonlySet<string>,
): Map<NoteLine, Trouble> {
	const remarks = new Map<NoteLine, Trouble>();
	const seen = new Set<string>();
	for (const line of lines)
		for (const behind of line.unitsBehindNumbers) {
			const { typed } = behind;
			const definition = definitions.get(typed);
			if (!definition?.defined || seen.has(typed)) continue;
			seen.add(typed);
			const text = line.text.slice(behind.from, behind.to);
			const readings = `${behind.number} ${spokenUnit(typed)}, and as ${behind.number} times the quantity \`${typed}\``;
			const suggestion = whyReserved(typed, names)?.suggestion ?? `${typed}1`;
			remarks.set(
				line,
				new Trouble(
					'ambiguous',
					behind,
					`\`${text}\` can be read as ${readings} (${whereabouts(definition)}). It counts as the unit.`,
					{
						mend: `Call the quantity \`${suggestion}\`, say.`,
						rename: { from: definition.defined.typed, to: suggestion },
					},
				),
			);
		}
	return remarks;
}

/** The fault of a line on a circle, which begins with its name. */
export function circleTrouble(
	circle: string[],
	definitions: ReadonlyMap<string, NoteLine>,
): Trouble | undefined {
	const lines = circle
		.filter((member) => member !== leftOut)
		.flatMap((member) => definitions.get(member) ?? []);
	// A function may use itself: whether it ends is seen when it is computed.
	if (lines.every((line) => line.kind === 'function')) return undefined;
	const [line] = lines;
	if (!line) return undefined;
	const next = circle[1];
	const at = line.references.find((reference) => reference.name === next) ?? line.defined!;
	const shown = circle
		.map((member) => definitions.get(member)?.defined?.typed ?? member)
		.join(' → ');
	const itself = circle.length === 2;
	return new Trouble(
		'circle',
		at,
		itself
			? `\`${line.defined?.typed ?? ''}\` is defined by itself: ${shown}.`
			: `The definitions go in a circle: ${shown}.`,
		{
			mend: 'Define one of them without the others.',
		},
	);
}

function spokenUnit(typed: string): string {
	const symbol = findSymbol(typed);
	return symbol ? spokenName(symbol) : typed;
}
