import type { ThermocoupleType } from '../tables/thermocouple-coefficients';
import { thermocoupleType } from '../tables/thermocouples';
import { answered } from './answered';
import { quoted } from './quoted';
import type { Single } from './tabled';

/** The type of a letter. Throws Refusal for a letter without a table. */
export function typeOf(letter: Single | undefined): ThermocoupleType {
	return answered(thermocoupleType(quoted(letter)));
}
