import * as fc from 'fast-check';

/** A formula with the value and the base units that it has by hand: numbers in SI units. */
export interface Worked {
	source: string;
	value: number;
	/** The largest number on the way: what cancels is lost beside it. */
	largest: number;
}

type Kind = '1' | 'V' | 'A' | 'ohm' | 'W' | 'F' | 's' | 'Hz' | 'J';
export const kinds: readonly Kind[] = ['1', 'V', 'A', 'ohm', 'W', 'F', 's', 'Hz', 'J'];

const prefixes: Readonly<Record<string, number>> = { n: 1e-9, u: 1e-6, m: 1e-3, '': 1, k: 1e3 };
const prefixed: Readonly<Record<Kind, string>> = {
	'1': '',
	V: 'u,m,,k',
	A: 'n,u,m,',
	ohm: 'm,,k',
	W: 'u,m,,k',
	F: 'n,u,m,',
	s: 'n,u,m,',
	Hz: ',k',
	J: 'u,m,,k',
};

function literal(kind: Kind): fc.Arbitrary<Worked> {
	const digits = fc.integer({ min: 1, max: 9_999 }).map((n) => n / 16);
	if (kind === '1') return digits.map((n) => ({ source: String(n), value: n, largest: n }));
	return fc.tuple(digits, fc.constantFrom(...prefixed[kind].split(','))).map(([n, prefix]) => {
		const value = n * (prefixes[prefix] ?? 1);
		return { source: `${n} ${prefix}${kind}`, value, largest: value };
	});
}

interface Rule {
	of: readonly Kind[];
	source: string;
	value: (...numbers: number[]) => number;
}

function rule(source: string, of: string, value: Rule['value']): Rule {
	return { source, of: of.split(' ') as Kind[], value };
}

const beside = (a: number, b: number) => 1 / (1 / a + 1 / b);

/** What holds for values of any kind. */
function common(kind: Kind): Rule[] {
	return [
		rule('(_ + _)', `${kind} ${kind}`, (a, b) => a + b),
		rule('(_ - _)', `${kind} ${kind}`, (a, b) => a - b),
		rule('(_ * _)', `${kind} 1`, (a, b) => a * b),
		rule('(_ / _)', `${kind} 1`, (a, b) => a / b),
		rule('max(_, _)', `${kind} ${kind}`, Math.max),
		rule('abs(_)', kind, Math.abs),
		rule('[_, _][2]', `${kind} ${kind}`, (_, b) => b),
		rule('mean(_, _)', `${kind} ${kind}`, (a, b) => (a + b) / 2),
		rule('(_ < _ ? _ : _)', `1 1 ${kind} ${kind}`, (a, b, yes, no) => (a < b ? yes : no)),
		rule('sqrt(_ * _)', `${kind} ${kind}`, (a, b) => Math.sqrt(a * b)),
		rule('hypot(_, _)', `${kind} ${kind}`, Math.hypot),
		rule('polynomial(_, _)', `1 ${kind}`, (_, c0) => c0),
	];
}

const own: Readonly<Record<Kind, readonly Rule[]>> = {
	'1': [
		rule('(_ / _)', 'V V', (a, b) => a / b),
		rule('(_ * _)', 's Hz', (a, b) => a * b),
		rule('fromdB(dB(_))', '1', (a) => a),
		rule('(dBm(_) - dBm(_))', 'W W', (a, b) => 10 * (Math.log10(a) - Math.log10(b))),
	],
	V: [
		rule('(_ * _)', 'A ohm', (i, r) => i * r),
		rule('(_ / _)', 'W A', (p, i) => p / i),
		rule('divider(_, _, _)', 'V ohm ohm', (v, a, b) => (v * b) / (a + b)),
		rule('lsb(_, 12)', 'V', (v) => v / 4096),
		rule('johnson(_, 300 K, _)', 'ohm Hz', (r, f) => Math.sqrt(4 * 1.380649e-23 * 300 * r * f)),
	],
	A: [rule('(_ / _)', 'V ohm', (v, r) => v / r), rule('(_ / _)', 'W V', (p, v) => p / v)],
	ohm: [
		rule('(_ / _)', 'V A', (v, i) => v / i),
		rule('parallel(_, _)', 'ohm ohm', beside),
		rule('(_ / _)', 's F', (t, c) => t / c),
		rule('pt(0 degC, _)', 'ohm', (r) => r),
	],
	W: [rule('(_ * _)', 'V A', (v, i) => v * i), rule('(_ * _)', 'J Hz', (e, f) => e * f)],
	F: [rule('(_ / _)', 's ohm', (t, r) => t / r)],
	s: [
		rule('(1 / _)', 'Hz', (f) => 1 / f),
		rule('settling(_, _, 8, 1)', 'ohm F', (r, c) => r * c * 8 * Math.LN2),
	],
	Hz: [rule('(1 / (_ * _))', 'ohm F', (r, c) => 1 / (r * c))],
	J: [
		rule('(_ * _)', 'W s', (p, t) => p * t),
		rule('(_ * square(_) / 2)', 'F V', (c, v) => (c * v * v) / 2),
	],
};

const depth = fc.createDepthIdentifier();

/** Formulas whose units fit, by the kind of their value. */
export const typedFormulas = fc.letrec<Record<Kind, Worked>>((tie) => {
	const made = (kind: Kind) => [...own[kind], ...common(kind)].map((each) => applied(each, tie));
	return Object.fromEntries(
		kinds.map((kind) => [
			kind,
			fc.oneof(
				{ maxDepth: 4, depthIdentifier: depth },
				{ weight: 4, arbitrary: literal(kind) },
				...made(kind),
			),
		]),
	) as Record<Kind, fc.Arbitrary<Worked>>;
});

function applied({ of, source, value }: Rule, tie: (kind: Kind) => fc.Arbitrary<Worked>) {
	return fc.tuple(...of.map((kind) => tie(kind))).map((parts): Worked => {
		let next = 0;
		const result = value(...parts.map((part) => part.value));
		return {
			source: source.replace(/_/g, () => parts[next++]?.source ?? ''),
			value: result,
			largest: Math.max(Math.abs(result), ...parts.map((part) => part.largest)),
		};
	});
}
