import type { Evaluation, Quantity } from '$lib/calc/results';
import type { NoteCell, NoteContent } from './document';

/** Why a note may lead people to what can hurt them, and the cell that says so. */
export interface Caution {
	text: string;
	cell: string;
}

/** Common extra-low-voltage limits (IEC 62368-1, table 4, ES1: 60 V DC, 30 V rms, 42.4 V peak). */
const limits = { dc: 60, rms: 30, peak: 42.4 };

const factors: Readonly<Record<string, number>> = {
	n: 1e-9,
	u: 1e-6,
	µ: 1e-6,
	μ: 1e-6,
	m: 1e-3,
	'': 1,
	k: 1e3,
	M: 1e6,
	G: 1e9,
};

/** Joules in the units an energy is written in. */
const energies: Readonly<Record<string, number>> = { J: 1, 'W*s': 1, Wh: 3600, 'W*h': 3600 };

/** Words of a voltage's name or comment that say it is alternating. */
const rms = /(?<![a-z])(rms|r\.m\.s\.|ac|a\.c\.|vac)(?![a-z])/i;
const peak = /(?<![a-z])(peak|pk|crest|amplitude)(?![a-z])/i;
const mains = /(?<![\p{L}-])mains(?![\p{L}-])|\bline voltage\b|\bgrid voltage\b/iu;
const stored = /stored energy|energy stored|capacitor bank|charged capacitor|super-?capacitor/i;

/**
 * Everything in a note that asks for a caution: a voltage beyond the limits, energy that stays stored, a mains
 * connection. Voltages count as direct ones unless their name or comment says otherwise.
 */
export function cautionsOf(content: NoteContent, results: Evaluation): Caution[] {
	return [
		...Object.entries(results.quantities).flatMap(([name, quantity]) => ofQuantity(name, quantity)),
		...content.cells.flatMap(ofWords),
	];
}

function ofQuantity(name: string, quantity: Quantity): Caution[] {
	const { unit, cell, description = '', readout } = quantity;
	const numbers = quantity.value === null ? (quantity.values ?? []) : [quantity.value];
	const joules = energies[unit] ?? scaled(unit, 'J');
	const doubt = quantity.expandedUncertainty ?? 0;
	const largest = Math.max(0, ...numbers.map((number) => Math.abs(number) + doubt));
	if (joules !== undefined && largest > 0 && stored.test(`${spoken(name)} ${description}`)) {
		return [{ cell, text: `${name} is stored energy (${readout.text}).` }];
	}
	const volts = scaled(unit, 'V');
	if (volts === undefined) return [];
	const words = `${spoken(name)} ${description}`;
	const kind = peak.test(words) ? 'peak' : rms.test(words) ? 'rms' : 'dc';
	if (largest * volts <= limits[kind]) return [];
	const limit = { dc: '60 V DC', rms: '30 V AC rms', peak: '42.4 V peak' }[kind];
	return [{ cell, text: `${name} (${readout.text}) is more than ${limit}.` }];
}

function ofWords({ id: cell, kind, source }: NoteCell): Caution[] {
	const found: Caution[] = [];
	if (mains.test(source)) found.push({ cell, text: 'The text speaks of a mains connection.' });
	if (kind === 'text' && stored.test(source))
		found.push({ cell, text: 'The text speaks of stored energy.' });
	return found;
}

function scaled(unit: string, base: string): number | undefined {
	return unit.endsWith(base) ? factors[unit.slice(0, -base.length)] : undefined;
}

/** A name with its parts apart, so that its words are found. */
function spoken(name: string): string {
	return name.replaceAll('_', ' ');
}
