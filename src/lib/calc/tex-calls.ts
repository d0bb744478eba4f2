import { bracketed, level, within, type Piece } from './tex-pieces';

type Setting = (args: Piece[]) => Piece | undefined;

const named =
	(tex: string): Setting =>
	(args) => ({ tex: tex + list(args), level: level.power });

const between =
	(left: string, right: string): Setting =>
	([x]) => ({ tex: `${left}${x?.tex ?? ''}${right}`, level: level.atom });

const raised =
	(exponent: string): Setting =>
	([x]) =>
		x && { tex: `${within(x, level.atom)}^{${exponent}}`, level: level.power };

const beside = (args: Piece[]): Piece => ({
	tex: args.map((arg) => within(arg, level.quantity)).join(' \\parallel '),
	level: level.sum,
});

/** Functions that are set in another way than with their name. */
const settings: Readonly<Record<string, Setting>> = {
	sqrt: between('\\sqrt{', '}'),
	cbrt: between('\\sqrt[3]{', '}'),
	abs: between('\\left|', '\\right|'),
	floor: between('\\left\\lfloor ', '\\right\\rfloor '),
	ceil: between('\\left\\lceil ', '\\right\\rceil '),
	square: raised('2'),
	cube: raised('3'),
	exp: ([x]) => x && { tex: `\\mathrm{e}^{${x.tex}}`, level: level.power },
	log: ([x, base]) => x && named(base ? `\\log_{${base.tex}}` : '\\ln')([x]),
	log10: named('\\log_{10}'),
	log2: named('\\log_{2}'),
	sin: named('\\sin'),
	cos: named('\\cos'),
	tan: named('\\tan'),
	sinh: named('\\sinh'),
	cosh: named('\\cosh'),
	tanh: named('\\tanh'),
	asin: named('\\arcsin'),
	acos: named('\\arccos'),
	atan: named('\\arctan'),
	min: named('\\min'),
	max: named('\\max'),
	mod: ([a, b]) =>
		a &&
		b && {
			tex: `${within(a, level.product)} \\bmod ${within(b, level.sign)}`,
			level: level.product,
		},
	parallel: (args) => (args.length > 1 ? beside(args) : undefined),
	divider: ([input, upper, lower, load]) => {
		if (!input || !upper || !lower) return undefined;
		const arm = load ? bracketed(beside([lower, load]).tex) : within(lower, level.sum);
		const top = load ? beside([lower, load]).tex : lower.tex;
		return {
			tex: `${within(input, level.product)} \\cdot \\frac{${top}}{${within(upper, level.sum)} + ${arm}}`,
			level: level.product,
		};
	},
};

/** A call: as mathematics sets it where it has a way of its own, else `symbol` with the values behind it. */
export function callTex(name: string, symbol: string, args: Piece[]): Piece {
	const own = Object.hasOwn(settings, name) ? settings[name]?.(args) : undefined;
	return own ?? { tex: symbol + list(args), level: level.power };
}

function list(args: Piece[]): string {
	return bracketed(args.map(({ tex }) => tex).join(',\\, '));
}
