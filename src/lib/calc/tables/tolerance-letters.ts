/** Relative limits of a part's value. */
export interface Tolerance {
	lower: number;
	upper: number;
}

/**
 * Letters of symmetric tolerances in percent, IEC 60062:2016. F, G, P and W were seen in print; the others are from
 * memory.
 */
const percents: Readonly<Record<string, number>> = {
	E: 0.005,
	L: 0.01,
	P: 0.02,
	W: 0.05,
	B: 0.1,
	C: 0.25,
	D: 0.5,
	F: 1,
	G: 2,
	H: 3,
	J: 5,
	K: 10,
	M: 20,
	N: 30,
};

/** Letters of lopsided tolerances in percent, from memory. */
const lopsided: Readonly<Record<string, readonly [number, number]>> = {
	Q: [-10, 30],
	T: [-10, 50],
	S: [-20, 50],
	Z: [-20, 80],
};

/** Letters of capacitors below 10 pF: picofarads to either side. */
const picofarads: Readonly<Record<string, number>> = { B: 0.1, C: 0.25, D: 0.5, F: 1 };

/** Limits that a letter stands for; undefined for one that stands for none. `farads` is a capacitor's value. */
export function toleranceOf(letter: string, farads?: number): Tolerance | undefined {
	if (farads !== undefined && farads < 10e-12 && Object.hasOwn(picofarads, letter)) {
		const share = (picofarads[letter]! * 1e-12) / farads;
		return { lower: -share, upper: share };
	}
	if (Object.hasOwn(percents, letter)) {
		const share = percents[letter]! / 100;
		return { lower: -share, upper: share };
	}
	if (!Object.hasOwn(lopsided, letter)) return undefined;
	const [lower, upper] = lopsided[letter]!;
	return { lower: lower / 100, upper: upper / 100 };
}
