import { canonical } from './language/characters';
import { hasNames } from './language/nodes';
import type { Note } from './note';
import type { FormulaTex, Quantity } from './results';
import { formulaTex } from './tex';
import { symbolTex } from './tex-words';

/** Characters of TeX beyond which a formula is not typeset: nobody would read it. */
const longest = 6000;

/** Adds the typeset formulas of some quantities, with symbols and with figures. */
export function addFormulas(
	quantities: Record<string, Quantity>,
	names: readonly string[],
	note: Note,
): void {
	const readout = (name: string) => {
		const typed = note.definition(name)?.defined?.typed;
		return typed !== undefined && Object.hasOwn(quantities, typed)
			? quantities[typed]?.readout
			: undefined;
	};
	for (const name of names) {
		const quantity = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
		const body = note.definition(canonical(name))?.body;
		if (!quantity || !body) continue;
		const symbols = `${symbolTex(name)} = ${formulaTex(body)}`;
		if (symbols.length > longest) continue;
		const formula: FormulaTex = { symbols };
		const figures = hasNames(body) ? formulaTex(body, readout) : '';
		if (figures !== '' && figures.length <= longest) formula.figures = figures;
		quantities[name] = { ...quantity, formula };
	}
}
