import { formatNumber } from '$lib/calc/units/number-text';

type UnitName = 'V' | 'ohm' | 'A' | 'W';

const prefixes: Readonly<Record<string, number>> = {
	p: -12,
	n: -9,
	u: -6,
	µ: -6,
	μ: -6,
	m: -3,
	'': 0,
	k: 3,
	M: 6,
	G: 9,
};
const written: Readonly<Record<UnitName, string>> = {
	V: 'V',
	ohm: 'ohm|Ω|Ω',
	A: 'A',
	W: 'W',
};

/** Reads `470 kohm`, `470k` or `470e3` as a number in the unit; undefined for anything else. */
export function amountOf(text: string, unit: UnitName): number | undefined {
	const pattern = `^(\\d+\\.?\\d*|\\.\\d+)(?:e([+-]?\\d{1,2}))?\\s*([pnuµμmkMG]?)(?:${written[unit]})?$`;
	const match = new RegExp(pattern).exec(text.trim());
	if (!match) return undefined;
	const [, digits = '', power = '0', prefix = ''] = match;
	// Written as one decimal number, so that 38.3 k is the double next to 38300.
	return Number(`${digits}e${Number(power) + (prefixes[prefix] ?? 0)}`);
}

/** Reads `0.5 %` or `0.5` as a share. */
export function shareOf(text: string): number | undefined {
	const match = /^(\d+\.?\d*|\.\d+)\s*%?$/.exec(text.trim());
	return match ? Number(`${match[1]}e-2`) : undefined;
}

const steps: readonly [string, number][] = [
	['M', 6],
	['k', 3],
	['', 0],
	['m', -3],
	['µ', -6],
	['n', -9],
	['p', -12],
];

/** An amount as it is shown, with the prefix that fits. */
export function shown(value: number, unit: UnitName, digits = 4): string {
	const size = Number(Math.abs(value).toPrecision(digits));
	const [prefix, power] = steps.find(([, least]) => size >= Number(`1e${least}`)) ?? ['', 0];
	const number = formatNumber(value / Number(`1e${power}`), digits);
	return `${number}\u00a0${prefix}${unit === 'ohm' ? 'Ω' : unit}`;
}

/** An amount as it is typed into a formula. */
export function typed(value: number, unit: UnitName): string {
	const size = Math.abs(value);
	const [prefix, power] =
		size >= 1e6 ? ['M', 6] : size >= 1e3 ? ['k', 3] : size >= 1 || size === 0 ? ['', 0] : ['m', -3];
	return `${Number(`${value}e${-Number(power)}`)} ${prefix}${unit}`;
}
