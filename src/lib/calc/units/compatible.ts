import { parseUnit } from '../language/parse-line';
import { Trouble } from '../trouble';
import { isNone, same } from './dimension';
import { prefixesOf } from './display';
import { findSymbol, unitSymbols } from './table';
import { one, type Unit } from './unit';

/** A unit to choose: as it is typed and as it is printed. */
export interface UnitChoice {
	text: string;
	label: string;
}

/** Units of the same dimension that a readout may stand in, the smallest first; a pure number has %, ppm and ppb. */
export function compatibleUnits(text: string): UnitChoice[] {
	const unit = text === '1' ? one : parseUnit(text);
	const [first, ...rest] = unit.parts;
	if (!first || isNone(unit.dimension))
		return [...unitSymbols()]
			.filter(isShare)
			.sort((a, b) => size(a) - size(b))
			.map(choiceOf);
	if (rest.length === 0 && first.power === 1) return ofSymbols(unit);
	if (first.power !== 1) return [{ text: unit.text, label: unit.label }];
	const prefixes = prefixesOf(first.symbol.base) ?? [];
	return prefixes.flatMap((prefix) => {
		const symbol = findSymbol(prefix + first.symbol.base);
		if (!symbol) return [];
		const tail = unit.text.slice(first.symbol.text.length);
		const label = symbol.label + unit.label.slice(first.symbol.label.length);
		return [{ text: symbol.text + tail, label }];
	});
}

type Symbol = ReturnType<typeof findSymbol> & object;

function ofSymbols({ dimension, offset, parts }: Unit): UnitChoice[] {
	const scale = offset !== 0;
	const usual = parts[0]?.symbol.base;
	return [...unitSymbols()]
		.filter((symbol) => same(symbol.dimension, dimension))
		.filter((symbol) => symbol.offset === 0 || scale)
		.filter((symbol) => {
			const prefix = symbol.text.slice(0, symbol.text.length - symbol.base.length);
			return symbol.base === usual || prefix === '' || prefixesOf(symbol.base)?.includes(prefix);
		})
		.sort((a, b) => size(a) - size(b))
		.map(choiceOf);
}

const size = ({ factor, decade }: Symbol) => factor * 10 ** decade;
const isShare = ({ base }: Symbol) => ['%', 'ppm', 'ppb'].includes(base);
const choiceOf = ({ text, label }: Symbol): UnitChoice => ({ text, label });

/** A typed unit, if readouts of a quantity in `unit` may stand in it; else a sentence that says why not. */
export function fittingUnit(typed: string, unit: string): UnitChoice | string {
	const wanted = unit === '1' ? one : parseUnit(unit);
	try {
		const { text, label, dimension } = parseUnit(typed);
		if (same(dimension, wanted.dimension)) return { text, label };
		const present = wanted.label === '' ? 'a pure number' : `in ${wanted.label}`;
		return `The quantity is ${present}, which ${label === '' ? typed : label} cannot express.`;
	} catch (error) {
		if (!(error instanceof Trouble)) throw error;
		return `\`${typed}\` is no unit. Write it as in a formula: mV, ohm, V/K.`;
	}
}
