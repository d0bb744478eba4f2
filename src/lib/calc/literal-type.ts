import { ofDimension, pure, type Type } from './types';
import { coherentUnit } from './units/coherent';
import { takesPrefix } from './units/display';
import { findSymbol } from './units/table';
import { fromSymbol, type Unit } from './units/unit';

/** Units other than a coherent one with a prefix stay in the readout: hours, percent, mV/°C. */
export function ofLiteral(unit: Unit | undefined): Type {
	if (!unit) return pure;
	const { dimension } = unit;
	const first = unit.parts[0];
	const base = first && unit.parts.length === 1 && first.power === 1 ? first.symbol : undefined;
	if (base && takesPrefix(unit)) {
		const coherent = coherentUnit(dimension);
		const family = coherent.parts.length === 1 ? coherent.parts[0]?.symbol.base : undefined;
		if (family === base.base) return ofDimension(dimension);
		const plain = findSymbol(base.base);
		return { kind: 'number', dimension, ...(plain && { unit: fromSymbol(plain) }) };
	}
	if (coherentUnit(dimension).text === unit.text) return ofDimension(dimension);
	return {
		kind: 'number',
		dimension,
		unit,
		fixed: true,
		...(unit.offset !== 0 && { point: true }),
	};
}
