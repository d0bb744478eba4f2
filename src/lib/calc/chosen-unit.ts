import { parseUnit } from './language/parse-line';
import type { Display, Options } from './results';
import { Trouble } from './trouble';
import type { Type } from './types';
import { same } from './units/dimension';

/** How somebody chose that a quantity's readouts are set; undefined where nobody did. */
export function choiceOf(
	name: string | undefined,
	{ shown = {} }: Pick<Options, 'shown'>,
): Display | undefined {
	return name !== undefined && Object.hasOwn(shown, name) ? shown[name] : undefined;
}

/** A type whose readouts stand in the chosen unit; the type as it is where that unit does not fit or cannot be read. */
export function inChosenUnit(type: Type, choice: Display | undefined): Type {
	if (choice?.unit === undefined) return type;
	try {
		const unit = parseUnit(choice.unit);
		if (!type.dimension || !same(type.dimension, unit.dimension)) return type;
		return { ...type, unit, fixed: true, point: unit.offset !== 0 };
	} catch (error) {
		if (error instanceof Trouble) return type;
		throw error;
	}
}
