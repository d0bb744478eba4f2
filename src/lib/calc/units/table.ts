import { mathjs } from '../language/mathjs';
import { dimension, none, type Dimension } from './dimension';

/** One unit symbol: value in SI = number × factor × 10^decade + offset. */
export interface UnitSymbol {
	/** As typed with an ordinary keyboard: `uV`, `kohm`, `degC`. */
	readonly text: string;
	/** As printed: `µV`, `kΩ`, `°C`. */
	readonly label: string;
	readonly dimension: Dimension;
	readonly factor: number;
	readonly decade: number;
	/** Kelvin at the scale's zero; 0 for all units but temperatures with a zero of their own. */
	readonly offset: number;
	/** The symbol without its prefix. */
	readonly base: string;
}

const decades: Readonly<Record<string, number>> = {
	f: -15,
	p: -12,
	n: -9,
	u: -6,
	m: -3,
	c: -2,
	d: -1,
	h: 2,
	k: 3,
	M: 6,
	G: 9,
	T: 12,
};

/**
 * Units that may be typed, with the prefixes the trade uses with them. Only these are units, so that names such as
 * `Rs`, `Ts` or `fs` stay free for quantities although a prefix and a symbol would spell them.
 */
const listed: Readonly<Record<string, string>> = {
	V: 'p n u m k M',
	A: 'f p n u m k',
	ohm: 'u m k M G T',
	W: 'p n u m k M G',
	F: 'f p n u m',
	H: 'p n u m',
	S: 'p n u m k',
	C: 'f p n u m',
	J: 'n u m k M',
	N: 'u m k M',
	Pa: 'u m h k M G',
	Hz: 'u m k M G T',
	T: 'n u m',
	Wb: 'n u m',
	K: 'u m',
	s: 'p n u m',
	m: 'p n u m c d k',
	g: 'n u m k',
	mol: 'u m k',
	cd: 'm',
	bit: '',
	byte: '',
	min: '',
	h: '',
	day: '',
	week: '',
	degC: '',
	degF: '',
	deg: '',
	rad: 'u m',
	arcmin: '',
	arcsec: '',
	L: 'u m',
	l: 'u m',
	bar: 'u m',
	atm: '',
	torr: '',
	psi: '',
	mmHg: '',
	lbf: '',
	kgf: '',
	eV: 'm k M G',
	Wh: 'm k M',
	Ah: 'u m k',
	VA: 'm k M',
	in: '',
	ft: '',
	yd: '',
	mi: '',
	mil: '',
	lb: '',
	oz: '',
	hp: '',
	gallon: '',
};

/** Factors where the library's are older or shorter than today's definition. */
const exact: Readonly<Record<string, { factor: number; like?: string }>> = {
	// The 2019 SI fixes the elementary charge (SI Brochure, 9th edition, table 1).
	eV: { factor: 1.602176634e-19 },
	// NIST SP 811 (2008), B.8: conventional millimetre of mercury, and torr as 101 325/760 Pa.
	mmHg: { factor: 133.322387415 },
	torr: { factor: 101325 / 760 },
	// SP 811: pound-force per square inch and 550 foot pound-force per second, from the exact pound and inch.
	psi: { factor: (0.45359237 * 9.80665) / 0.0254 ** 2 },
	hp: { factor: 550 * 0.3048 * 0.45359237 * 9.80665 },
	VA: { factor: 1, like: 'W' },
};

/** Spelled-out names, each with its plural. */
const spelled: Readonly<Record<string, string>> = {
	volt: 'V',
	ohm: 'ohm',
	ampere: 'A',
	watt: 'W',
	farad: 'F',
	henry: 'H',
	siemens: 'S',
	coulomb: 'C',
	joule: 'J',
	newton: 'N',
	pascal: 'Pa',
	hertz: 'Hz',
	tesla: 'T',
	weber: 'Wb',
	kelvin: 'K',
	second: 's',
	minute: 'min',
	hour: 'h',
	meter: 'm',
	gram: 'g',
	percent: '%',
	inch: 'in',
	radian: 'rad',
	degree: 'deg',
	liter: 'L',
};

const labels: Readonly<Record<string, string>> = {
	ohm: 'Ω',
	degC: '°C',
	degF: '°F',
	deg: '°',
	arcmin: '′',
	arcsec: '″',
};

interface LibraryUnit {
	dimensions: number[];
	value: number | { n: number; d: number };
	offset: number;
}

/** mathjs counts kg, m, s, A, K, cd, mol, plane angle, bit. An angle is a pure number here, as in the SI. */
function fromLibrary(name: string): { dimension: Dimension; value: number; offset: number } {
	const units = (mathjs.Unit as unknown as { UNITS: Record<string, LibraryUnit> }).UNITS;
	const unit = units[name];
	if (!unit) throw new Error(`mathjs has no unit ${name}`);
	const value =
		typeof unit.value === 'number' ? unit.value : Number(unit.value.n) / Number(unit.value.d);
	const powers = unit.dimensions.filter((_, i) => i !== 7);
	return { dimension: dimension(powers), value, offset: Number(unit.offset) * value };
}

/** Splits off a power of ten, so that `4.7 uF` becomes 4.7/10⁶ and not 4.7 times a rounded 10⁻⁶. */
function split(value: number): { factor: number; decade: number } {
	const decade = Math.round(Math.log10(value));
	return Number(`1e${decade}`) === value ? { factor: 1, decade } : { factor: value, decade: 0 };
}

function build(): ReadonlyMap<string, UnitSymbol> {
	const table = new Map<string, UnitSymbol>();
	for (const [base, prefixes] of Object.entries(listed)) {
		const override = exact[base];
		const library = fromLibrary(override?.like ?? base);
		const { factor, decade } = split(override?.factor ?? library.value);
		const label = labels[base] ?? base;
		const plain = { dimension: library.dimension, factor, offset: library.offset, base };
		table.set(base, { ...plain, text: base, label, decade });
		for (const prefix of prefixes.split(' ').filter(Boolean)) {
			const text = prefix + base;
			table.set(text, {
				...plain,
				text,
				label: (prefix === 'u' ? 'µ' : prefix) + label,
				decade: decade + (decades[prefix] ?? 0),
			});
		}
	}
	for (const [text, value] of [
		['%', -2],
		['ppm', -6],
		['ppb', -9],
	] as const)
		table.set(text, {
			text,
			label: text,
			dimension: none,
			factor: 1,
			decade: value,
			offset: 0,
			base: text,
		});
	return table;
}

const table = build();

/** The unit a symbol stands for, however it is typed: `kohm`, `kΩ`, `µA`, `°C`, `volts`. */
export function findSymbol(typed: string): UnitSymbol | undefined {
	const direct = table.get(typed);
	if (direct) return direct;
	const plain = typed
		.replace(/^[\u00b5\u03bc](?=.)/, 'u')
		.replace(/[\u03a9\u2126]$/, 'ohm')
		.replace(/^°(?=[CF]$)/, 'deg')
		.replace(/^°$/, 'deg')
		.replace(/Ohms?$/, 'ohm');
	const found = table.get(plain);
	if (found) return found;
	const name = spelled[plain] ?? (plain.endsWith('s') ? spelled[plain.slice(0, -1)] : undefined);
	return name === undefined ? undefined : table.get(name);
}

/** Every unit symbol. */
export function unitSymbols(): Iterable<UnitSymbol> {
	return table.values();
}

/** Symbols as they are typed, for suggestions. */
export function symbolTexts(): Iterable<string> {
	return table.keys();
}

const prefixNames: Readonly<Record<string, string>> = {
	f: 'femto',
	p: 'pico',
	n: 'nano',
	u: 'micro',
	m: 'milli',
	c: 'centi',
	d: 'deci',
	h: 'hecto',
	k: 'kilo',
	M: 'mega',
	G: 'giga',
	T: 'tera',
};

/** What a unit is called in a sentence: volt, kiloohm, °C. */
export function spokenName({ text, base, label }: UnitSymbol): string {
	const name = Object.keys(spelled).find((word) => spelled[word] === base);
	if (name === undefined) return label;
	return text === base ? name : (prefixNames[text.slice(0, -base.length)] ?? '') + name;
}
