/** A name cut for typesetting: `base` stands in italics, `sub` below the line. Offsets are columns of the name. */
export interface SymbolParts {
	base: string;
	/** Sign shown for the base where its name is that of a Greek letter, otherwise the base itself. */
	glyph: string;
	/** End of the base in the name. */
	baseTo: number;
	/** Start of the subscript in the name, behind an underscore; the name's length where it has none. */
	subFrom: number;
	/** Subscript as it is shown: further underscores part it with commas. */
	sub: string;
}

const greek: Readonly<Record<string, string>> = {
	alpha: 'α',
	beta: 'β',
	gamma: 'γ',
	delta: 'δ',
	epsilon: 'ε',
	zeta: 'ζ',
	eta: 'η',
	theta: 'θ',
	kappa: 'κ',
	lambda: 'λ',
	mu: 'µ',
	nu: 'ν',
	xi: 'ξ',
	pi: 'π',
	rho: 'ρ',
	sigma: 'σ',
	tau: 'τ',
	phi: 'φ',
	chi: 'χ',
	psi: 'ψ',
	omega: 'ω',
	Gamma: 'Γ',
	Delta: 'Δ',
	Theta: 'Θ',
	Lambda: 'Λ',
	Sigma: 'Σ',
	Phi: 'Φ',
	Psi: 'Ψ',
	Omega: 'Ω',
};

/** Subscripts that measurement people write right behind a quantity's letter (common practice, no source). */
const subscripts =
	'max|min|nom|typ|ref|in|out|adc|dac|s|src|load|exact|full|zero|fs|bat|sup|cc|dd|ss|os|off|on|lsb|th|sense|sh|shunt|up|upper|low|lower|top|bottom|mid|avg|rms|pk|pp|ripple|err|gain|meas|cal|amb|sum|tot|total|lim|trip|set|reset|hyst|drop|loop|par|ser|eq|d|g|j|a|b|c|e';

const numbered = new RegExp(`^(\\p{L}|${Object.keys(greek).join('|')})(\\d+\\p{Ll}?)$`, 'u');
const lettered = new RegExp(`^([VUIRCLPTEZQGW])(\\d*(?:${subscripts})\\d*)$`);

/** `V_ref`, `Vref` and `R1` get a subscript, `gainError` does not; `delta_gain` shows δ. */
export function typeset(name: string): SymbolParts {
	const underscore = name.indexOf('_', 1);
	if (underscore > 0 && underscore < name.length - 1) {
		return cut(name, underscore, underscore + 1);
	}
	const match = numbered.exec(name) ?? lettered.exec(name);
	const baseTo = match?.[1]?.length ?? name.length;
	return cut(name, baseTo, baseTo);
}

function cut(name: string, baseTo: number, subFrom: number): SymbolParts {
	const base = name.slice(0, baseTo);
	return {
		base,
		glyph: greek[base] ?? base,
		baseTo,
		subFrom,
		sub: name.slice(subFrom).replaceAll('_', ','),
	};
}
