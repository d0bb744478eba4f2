import { refuse, refuseNotPositive, type Refusal } from './refusal';
import { toleranceOf, type Tolerance } from './tolerance-letters';

export type PartKind = 'resistance' | 'capacitance';

/** What a value code says: ohms or farads, and the tolerance where a letter gives one. */
export interface PartValue {
	kind: PartKind;
	value: number;
	tolerance?: Tolerance;
}

// IEC 60062:2016, letter and digit code; from memory. The letter stands at the decimal point.
const exponents: Readonly<Record<PartKind, Readonly<Record<string, number>>>> = {
	resistance: { L: -3, R: 0, K: 3, M: 6, G: 9, T: 12 },
	capacitance: { p: -12, n: -9, u: -6, m: -3, F: 0 },
};
const spellings: Readonly<Record<string, string>> = { r: 'R', k: 'K', µ: 'u', μ: 'u' };

const pattern = /^(\d*)([LRrKkMGTpnuµμmF])(\d*)([A-Z])?$/u;

/** Value of a code such as 4k7, R47, 100R, 2M2J, 4p7. `kind` decides what a lone m means: milliohms or millifarads. */
export function readValueCode(text: string, kind?: PartKind): PartValue | Refusal {
	const [, whole = '', typed = '', rest = '', letter] = pattern.exec(text.trim()) ?? [];
	if (!typed || whole + rest === '') return refuseCode(text);
	const mark = spellings[typed] ?? typed;
	const found = meaning(mark, kind);
	if (!found) return mark === 'm' && !kind ? refuseMilli(whole, rest) : refuseCode(text);
	const value = Number(`${whole || '0'}.${rest || '0'}e${found.exponent}`);
	const fault = refuseNotPositive({ value });
	if (fault) return { ...fault, argument: 'text' };
	if (!letter) return { kind: found.kind, value };
	const farads = found.kind === 'capacitance' ? value : undefined;
	const tolerance = toleranceOf(letter, farads);
	if (tolerance) return { kind: found.kind, value, tolerance };
	return refuse('text', `${letter} is no letter of a tolerance`, { argument: 'text' });
}

function meaning(
	mark: string,
	wanted?: PartKind,
): { kind: PartKind; exponent: number } | undefined {
	if (mark === 'm') return wanted ? { kind: wanted, exponent: -3 } : undefined;
	for (const kind of ['resistance', 'capacitance'] as const) {
		const exponent = exponents[kind][mark];
		if (exponent !== undefined && (wanted ?? kind) === kind) return { kind, exponent };
	}
	return undefined;
}

function refuseCode(text: string): Refusal {
	return refuse('text', `${JSON.stringify(text.slice(0, 20))} is no value code`, {
		argument: 'text',
		mend: 'Write the letter at the decimal point: 4K7, R47, 100R, 2M2, 4p7, 100n.',
	});
}

function refuseMilli(whole: string, rest: string): Refusal {
	return refuse('text', 'm may mean milliohms or millifarads here', {
		argument: 'text',
		mend: `Write ${whole}L${rest} for milliohms, or the farads in u.`,
	});
}

/** Digits that a marking has room for. */
const mostDigits = 5;

/** Code of a value, of three characters at least: 4K7, 10K, R47, 100R, 4p7. Refuses what five digits do not hold. */
export function writeValueCode(value: number, kind: PartKind): string | Refusal {
	const fault = refuseNotPositive({ value });
	if (fault) return fault;
	const [digits = '', power = '0'] = exactDigits(value);
	if (digits.length > mostDigits)
		return refuse('text', `A value code holds ${mostDigits} digits at most`, {
			argument: 'value',
			mend: 'Round it first, to a preferred value say.',
		});
	const exponent = Number(power);
	const ladder = Object.entries(exponents[kind]).map(([mark, at]) => ({ mark, at }));
	const [lowest, highest] = kind === 'resistance' ? [-3, 12] : [-12, 0];
	// R47 and R10 rather than 470L and 100L, as parts are marked.
	const leading =
		kind === 'resistance' && exponent === -1 ? 0 : exponent < lowest ? lowest : undefined;
	const step = leading ?? Math.min(highest, Math.floor(exponent / 3) * 3);
	const mark = ladder.find(({ at }) => at === step)?.mark;
	const before = exponent - step + 1;
	if (mark === undefined || before > mostDigits || before < -1)
		return refuse('outOfRange', 'There is no letter for a value of this size', {
			argument: 'value',
		});
	const padded = digits.padEnd(Math.max(before, 0), '0');
	const whole = before > 0 ? padded.slice(0, before) : '';
	const fraction = before > 0 ? padded.slice(before) : '0'.repeat(-before) + padded;
	return whole + mark + fraction.padEnd(Math.max(0, 2 - whole.length), '0');
}

/** Decimal digits without trailing zeros, and the exponent of the first, twelve digits counting. */
function exactDigits(value: number): string[] {
	const [mantissa = '', power = '0'] = value.toExponential(11).split('e');
	return [mantissa.replace('.', '').replace(/0+$/, ''), power];
}
