import type { Quantity } from '$lib/calc/results';
import { compatibleUnits, fittingUnit } from '$lib/calc/units/compatible';
import { AppError } from '$lib/errors';
import type { QuantityDetail, QuantityUnits } from '$lib/schemas/quantities';
import { demand, type Actor } from '../auth/access';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import * as store from '../evaluation/store';
import * as notes from '../notes/notes';
import { typeset } from './typeset';

/** A quantity of the working copy with all that is known of it. Throws AppError `notFound`. */
export async function get(actor: Actor, number: string, name: string): Promise<QuantityDetail> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const { seq, content } = await store.current(id);
	const options = { ...optionsOf(content), detail: [name] };
	const { quantities } = await evaluateInChild(content.cells, options, { note: id });
	const { formula, ...quantity } = find(quantities, name);
	const symbols = formula && typeset(formula.symbols);
	const figures = formula?.figures === undefined ? null : typeset(`= ${formula.figures}`);
	return { seq, quantity, formula: symbols ? { symbols, figures } : null };
}

/** Units that readouts of a quantity may stand in; a typed one is looked at. Throws AppError `notFound`. */
export async function units(
	actor: Actor,
	number: string,
	name: string,
	typed: string | null,
): Promise<QuantityUnits> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const { results } = await store.current(id);
	const { unit } = find(results.quantities, name);
	return {
		choices: compatibleUnits(unit),
		...(typed !== null && { typed: fittingUnit(typed, unit) }),
	};
}

/** The quantity of this name. Throws AppError `notFound`. */
export function find(quantities: Record<string, Quantity>, name: string): Quantity {
	const found = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
	if (!found) throw new AppError('notFound', `This note has no value for \`${name}\`.`);
	return found;
}
