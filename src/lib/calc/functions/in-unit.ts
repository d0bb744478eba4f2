import { ofLiteral } from '../literal-type';
import { Trouble } from '../trouble';
import { isPure, ofDimension, spoken, type Type } from '../types';
import { same, type Dimension } from '../units/dimension';
import { findSymbol, type UnitSymbol } from '../units/table';
import { fromSymbol } from '../units/unit';
import { expectNumber, refusePoint, type Argument } from './function';

function symbol(text: string): UnitSymbol {
	const found = findSymbol(text);
	if (!found) throw new Error(`No unit ${text}`);
	return found;
}

export function dimensionOf(unit: string): Dimension {
	return symbol(unit).dimension;
}

/** The type of a value in a unit, shown with the prefix that suits it. */
export function inUnit(unit: string): Type {
	return ofDimension(dimensionOf(unit));
}

/** The type of a temperature in °C. */
export const inCelsius: Type = ofLiteral(fromSymbol(symbol('degC')));

/** Throws Trouble unless the value is in a unit of the kind of `unit`: "The load is in Ω, not V." */
export function expectUnit(argument: Argument | undefined, unit: string, what: string): void {
	if (!argument) return;
	expectKind(argument, unit, what);
	refusePoint(argument, 'Computes with');
}

/** Throws Trouble unless the value is a temperature: on a scale, or absolute in kelvin. */
export function expectTemperature(argument: Argument | undefined, what: string): void {
	if (argument) expectKind(argument, 'K', what);
}

function expectKind(argument: Argument, unit: string, what: string): void {
	const { label, dimension } = symbol(unit);
	const { type } = argument;
	expectNumber(argument, `${what} takes`);
	if (!type.dimension || same(type.dimension, dimension)) return;
	throw new Trouble(
		'dimension',
		argument,
		`${what} is in ${label}, not ${spoken(type)}.`,
		isPure(type) ? { mend: `Give the number a unit, ${label} say.` } : {},
	);
}

const zero = symbol('degC').offset;

/** Kelvin as degrees Celsius; what is a hundredth but for the rounding of the subtraction is that hundredth. */
export function toCelsius(kelvin: number): number {
	const celsius = kelvin - zero;
	const near = Math.round(celsius * 100) / 100;
	return Math.abs(celsius - near) < 1e-10 ? near : celsius;
}

export function toKelvin(celsius: number): number {
	return celsius + zero;
}
