import { findSymbol } from '../units/table';
import { product, type Unit } from '../units/unit';

interface Constant {
	value: number;
	unit?: Unit;
}

function unit(...parts: [text: string, power: number][]): Unit {
	return product(
		parts.map(([text, power]) => {
			const symbol = findSymbol(text);
			if (!symbol) throw new Error(`No unit ${text}`);
			return { symbol, power };
		}),
	);
}

/** Constants of the language. Those of physics are the fixed ones of the 2019 SI (SI Brochure, 9th edition). */
export const constants: ReadonlyMap<string, Constant> = new Map<string, Constant>([
	['pi', { value: Math.PI }],
	['e', { value: Math.E }],
	['boltzmann', { value: 1.380649e-23, unit: unit(['J', 1], ['K', -1]) }],
	['elementaryCharge', { value: 1.602176634e-19, unit: unit(['C', 1]) }],
	['speedOfLight', { value: 299792458, unit: unit(['m', 1], ['s', -1]) }],
	['planckConstant', { value: 6.62607015e-34, unit: unit(['J', 1], ['s', 1]) }],
	['avogadro', { value: 6.02214076e23, unit: unit(['mol', -1]) }],
]);
