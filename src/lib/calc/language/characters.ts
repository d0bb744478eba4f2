/** Stands for `%` while mathjs parses, so that it reads as a unit behind a number and never as a remainder. */
export const percent = '\ue000';

const replaced: Readonly<Record<string, string>> = {
	'%': percent,
	'\u201c': '"',
	'\u201d': '"',
	'\u2212': '-',
	'\u00d7': '*',
	'\u00b7': '*',
	'\u22c5': '*',
	'\u202f': ' ',
	'\u2009': ' ',
	'\ufeff': ' ',
	'\r': ' ',
};

/** The line as mathjs is given it: as many characters, at the same places. */
export function prepared(line: string): string {
	return line.replace(
		/[%\u201c\u201d\u2212\u00d7\u00b7\u22c5\u202f\u2009\ufeff\r]/g,
		(c) => replaced[c] ?? c,
	);
}

/** A prepared piece as the person typed it, as far as that shows. */
export function asTyped(text: string): string {
	return text.replaceAll(percent, '%');
}

/** Letters of names and units: Latin, Greek, the underscore, µ, Ω, ° and the mark that stands for percent. */
export function isNameCharacter(c: string): boolean {
	return /^[A-Za-z_\u00b5\u00b0\u00c0-\u00d6\u00d8-\u00f6\u00f8-\u024f\u0370-\u03ff\u2126\ue000]$/.test(
		c,
	);
}

const greek: Readonly<Record<string, string>> = {
	α: 'alpha',
	β: 'beta',
	γ: 'gamma',
	δ: 'delta',
	ε: 'epsilon',
	ϵ: 'epsilon',
	ζ: 'zeta',
	η: 'eta',
	θ: 'theta',
	ϑ: 'theta',
	ι: 'iota',
	κ: 'kappa',
	λ: 'lambda',
	μ: 'mu',
	'\u00b5': 'mu',
	'\u2126': 'Omega',
	ν: 'nu',
	ξ: 'xi',
	ο: 'omicron',
	π: 'pi',
	ρ: 'rho',
	σ: 'sigma',
	ς: 'sigma',
	τ: 'tau',
	υ: 'upsilon',
	φ: 'phi',
	ϕ: 'phi',
	χ: 'chi',
	ψ: 'psi',
	ω: 'omega',
	Α: 'Alpha',
	Β: 'Beta',
	Γ: 'Gamma',
	Δ: 'Delta',
	Ε: 'Epsilon',
	Ζ: 'Zeta',
	Η: 'Eta',
	Θ: 'Theta',
	Ι: 'Iota',
	Κ: 'Kappa',
	Λ: 'Lambda',
	Μ: 'Mu',
	Ν: 'Nu',
	Ξ: 'Xi',
	Ο: 'Omicron',
	Π: 'Pi',
	Ρ: 'Rho',
	Σ: 'Sigma',
	Τ: 'Tau',
	Υ: 'Upsilon',
	Φ: 'Phi',
	Χ: 'Chi',
	Ψ: 'Psi',
	Ω: 'Omega',
};

/** The name by which a quantity is found: `δ_gain` and `delta_gain` are one quantity. */
export function canonical(name: string): string {
	return /^[\x20-\x7e]*$/.test(name)
		? name
		: name.replace(/[\u00b5\u0370-\u03ff\u2126]/g, (c) => greek[c] ?? c);
}
