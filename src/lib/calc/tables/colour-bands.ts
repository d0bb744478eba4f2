import { refuse, refuseNotPositive, type Refusal } from './refusal';

interface Colour {
	digit?: number;
	exponent: number;
	/** Percent to either side. */
	tolerance?: number;
	/** ppm/K. */
	drift?: number;
}

/**
 * Resistor colours, IEC 60062:2016. Digits, multipliers and the tolerances of brown, red, orange, yellow, gold and
 * silver were seen in print; pink, the other tolerances and the temperature coefficients of green to grey are from
 * memory. Grey meant 0.05 % before this edition.
 */
const colours = {
	pink: { exponent: -3 },
	silver: { exponent: -2, tolerance: 10 },
	gold: { exponent: -1, tolerance: 5 },
	black: { digit: 0, exponent: 0, drift: 250 },
	brown: { digit: 1, exponent: 1, tolerance: 1, drift: 100 },
	red: { digit: 2, exponent: 2, tolerance: 2, drift: 50 },
	orange: { digit: 3, exponent: 3, tolerance: 0.05, drift: 15 },
	yellow: { digit: 4, exponent: 4, tolerance: 0.02, drift: 25 },
	green: { digit: 5, exponent: 5, tolerance: 0.5, drift: 20 },
	blue: { digit: 6, exponent: 6, tolerance: 0.25, drift: 10 },
	violet: { digit: 7, exponent: 7, tolerance: 0.1, drift: 5 },
	grey: { digit: 8, exponent: 8, tolerance: 0.01, drift: 1 },
	white: { digit: 9, exponent: 9 },
} satisfies Record<string, Colour>;

export type BandColour = keyof typeof colours;

/** What bands say. `tolerance` is relative; `drift` is the temperature coefficient in 1/K. */
export interface BandedValue {
	ohms: number;
	tolerance: number;
	drift?: number;
}

/** Without a tolerance band: 20 %. */
const unmarked = 0.2;

/**
 * Value of three to six bands in reading order: two digits, multiplier and tolerance, or with five and six bands three
 * digits, multiplier, tolerance and temperature coefficient.
 */
export function readBands(names: readonly string[]): BandedValue | Refusal {
	if (names.length < 3 || names.length > 6)
		return refuse('text', `Resistors have three to six bands, not ${names.length}`, {
			argument: 'bands',
		});
	const bands: Colour[] = [];
	for (const name of names) {
		if (!Object.hasOwn(colours, name))
			return refuse('text', `${JSON.stringify(name.slice(0, 20))} is no colour of a band`, {
				argument: 'bands',
			});
		bands.push(colours[name as BandColour]);
	}
	const count = names.length < 5 ? 2 : 3;
	const digits = bands.slice(0, count).map(({ digit }) => digit);
	const [multiplier, tolerance, drift] = bands.slice(count);
	const blank = digits.findIndex((digit) => digit === undefined);
	if (blank >= 0) return refuseBand(names, blank, 'a digit');
	if (tolerance && tolerance.tolerance === undefined)
		return refuseBand(names, count + 1, 'a tolerance');
	if (drift && drift.drift === undefined)
		return refuseBand(names, count + 2, 'a temperature coefficient');
	return {
		ohms: Number(`${digits.join('')}e${multiplier?.exponent ?? 0}`),
		tolerance: tolerance ? (tolerance.tolerance ?? 0) / 100 : unmarked,
		...(drift && { drift: Number(`${drift.drift ?? 0}e-6`) }),
	};
}

/**
 * Bands of a resistance in reading order. `tolerance` is relative, none being the 20 % of three bands; `drift` is the
 * temperature coefficient in 1/K. A value of three digits and one with a temperature coefficient take five and six.
 */
export function writeBands(
	ohms: number,
	about: { tolerance?: number; drift?: number } = {},
): BandColour[] | Refusal {
	const fault = refuseNotPositive({ ohms });
	if (fault) return fault;
	const { tolerance = unmarked, drift } = about;
	const [mantissa = '', power = '0'] = ohms.toExponential(11).split('e');
	const significant = mantissa.replace('.', '').replace(/0+$/, '');
	const bare = tolerance === unmarked;
	const count = significant.length > 2 || drift !== undefined ? 3 : 2;
	if (significant.length > 3)
		return refuse('text', 'Bands hold three digits', {
			argument: 'ohms',
			mend: 'Round it first, to a preferred value say.',
		});
	if (bare && count === 3)
		return refuse('text', 'Three digits need a tolerance beside them', { argument: 'tolerance' });
	const digits = [...significant.padEnd(count, '0')].map((digit) =>
		named((colour) => colour.digit === Number(digit)),
	);
	const exponent = Number(power) - count + 1;
	const bands = [...digits, named((colour) => colour.exponent === exponent)];
	if (!bare) bands.push(named((colour) => near(colour.tolerance, tolerance * 100)));
	if (drift !== undefined) bands.push(named((colour) => near(colour.drift, drift * 1e6)));
	const whole = bands.flatMap((band) => band ?? []);
	if (whole.length === bands.length) return whole;
	const missing = ['digit', 'digit', 'digit']
		.slice(0, count)
		.concat('multiplier', 'tolerance', 'drift');
	return refuse('outOfRange', `There is no colour for this ${missing[bands.indexOf(undefined)]}`);
}

function named(is: (colour: Colour) => boolean): BandColour | undefined {
	return (Object.keys(colours) as BandColour[]).find((name) => is(colours[name]));
}

function near(of: number | undefined, wanted: number): boolean {
	return of !== undefined && Math.abs(of - wanted) <= 1e-9 * wanted;
}

function refuseBand(names: readonly string[], index: number, what: string): Refusal {
	return refuse('text', `Band ${index + 1}, ${names[index]}, does not stand for ${what}`, {
		argument: 'bands',
	});
}
