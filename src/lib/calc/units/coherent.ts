import { isNone, over, raised, times, type Dimension } from './dimension';
import { findSymbol, type UnitSymbol } from './table';
import { one, product, type Unit } from './unit';

function symbol(text: string): UnitSymbol {
	const found = findSymbol(text);
	if (!found) throw new Error(`No unit ${text}`);
	return found;
}

/**
 * Named units in the order they are preferred. Hertz is not among them, 1/s may be a rate: it is shown where a line was
 * typed in hertz or asks for it with `to Hz`. Nor is the weber: the trade says V·s of what an integrator sees.
 */
const named = ['V', 'A', 'ohm', 'W', 'F', 'H', 'S', 'C', 'J', 'N', 'Pa', 'T']
	.concat(['K', 's', 'm', 'kg', 'mol', 'cd', 'bit'])
	.map(symbol);
const bases = ['kg', 'm', 's', 'A', 'K', 'cd', 'mol', 'bit'].map(symbol);

const divisors: { symbol: UnitSymbol; power: number }[] = [
	...['K', 's', 'm', 'V', 'A', 'W', 'kg', 'mol', 'bit', 'ohm', 'N', 'Pa', 'C', 'J'].map((text) => ({
		symbol: symbol(text),
		power: 1,
	})),
	...['s', 'm', 'K', 'V', 'A'].map((text) => ({ symbol: symbol(text), power: 2 })),
	{ symbol: symbol('m'), power: 3 },
	{ symbol: symbol('Hz'), power: 0.5 },
	{ symbol: symbol('Hz'), power: 1 },
];
const factors = ['m', 's', 'K', 'V', 'A', 'mol', 'bit', 'kg'].map(symbol);

const found = new Map<string, Unit>();

/** The SI unit a quantity is shown in when nobody chose one: V·A gives W, V/A gives Ω, V/K stays V/K. */
export function coherentUnit(wanted: Dimension): Unit {
	let unit = found.get(wanted.key);
	if (!unit) {
		unit = search(wanted);
		if (found.size > 2_000) found.clear();
		found.set(wanted.key, unit);
	}
	return unit;
}

function search(wanted: Dimension): Unit {
	if (isNone(wanted)) return one;
	const exactly = named.find((unit) => unit.dimension === wanted);
	if (exactly) return product([{ symbol: exactly, power: 1 }]);
	for (const power of [2, 3, 4, -1, -2, 0.5])
		for (const unit of named)
			if (raised(unit.dimension, power) === wanted) return product([{ symbol: unit, power }]);
	for (const { symbol: divisor, power } of divisors) {
		const rest = times(wanted, raised(divisor.dimension, power));
		const top = named.find((unit) => unit.dimension === rest);
		if (top)
			return product([
				{ symbol: top, power: 1 },
				{ symbol: divisor, power: -power },
			]);
	}
	for (const factor of factors) {
		const rest = over(wanted, factor.dimension);
		const top = named.find((unit) => unit.dimension === rest);
		if (top)
			return product([
				{ symbol: top, power: 1 },
				{ symbol: factor, power: 1 },
			]);
	}
	return product(bases.map((base, i) => ({ symbol: base, power: wanted.powers[i] ?? 0 })));
}
