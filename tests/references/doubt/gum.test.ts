import { describe, expect, it } from 'vitest';
import { uncertaintyOf } from '$lib/calc/doubt/budget';
import { arcsine } from '$lib/calc/doubt/distributions/arcsine';
import { normal } from '$lib/calc/doubt/distributions/normal';
import { rectangular } from '$lib/calc/doubt/distributions/rectangular';
import { repeated } from '$lib/calc/doubt/distributions/repeated';
import { withDof } from '$lib/calc/doubt/distributions/shapes';
import { student } from '$lib/calc/doubt/distributions/student';
import { coverageFactor, normalProbability } from '$lib/calc/doubt/student';
import gumH from '../data/gum-h.json';
import { check, figuresOf, titleOf } from './published';
import { Sheet, sure } from './sheet';

describe(titleOf('gum-h1-first-order'), () => {
	const id = 'gum-h1-first-order';
	const sheet = new Sheet()
		.input('lS', 50_000_623, student(25, 18))
		.input('dMean', 215, student(5.8, 24))
		.input('d1', 0, student(3.9, 5))
		.input('d2', 0, student(6.7, 8))
		.input('alphaS', 11.5e-6, rectangular(2e-6))
		.input('thetaMean', -0.1, normal(0.2))
		.input('cyclic', 0, arcsine(0.5))
		.input('dAlpha', 0, withDof(sure(rectangular(1e-6)), 50))
		.input('dTheta', 0, withDof(sure(rectangular(0.05)), 2))
		.line('d', ['add', ['add', 'dMean', 'd1'], 'd2'])
		.line('theta', ['add', 'thetaMean', 'cyclic'])
		.line('drift', ['add', ['mul', 'dAlpha', 'theta'], ['mul', 'alphaS', 'dTheta']])
		.line('l', ['sub', ['add', 'lS', 'd'], ['mul', 'lS', 'drift']]);
	const length = sheet.uncertainty('l', 0.99);

	it('gives the printed contributions, also of parts that are lines of their own', () => {
		check(id, 'l', sheet.value('l') / 1e6);
		check(id, 'u(d)', sheet.uncertainty('d').standardUncertainty);
		check(id, 'nu_eff(d)', sheet.uncertainty('d').dof);
		check(id, 'u(theta)', sheet.uncertainty('theta').standardUncertainty);
		check(id, 'contribution of l_S', sheet.contribution('l', 'lS'));
		check(id, 'contribution of d', sheet.uncertainty('d').standardUncertainty);
		check(id, 'contribution of dalpha', sheet.contribution('l', 'dAlpha'));
		check(id, 'contribution of dtheta', sheet.contribution('l', 'dTheta'));
	});

	it('lists inputs whose sensitivity is zero with contribution zero', () => {
		expect(['alphaS', 'thetaMean', 'cyclic'].map((x) => sheet.contribution('l', x))).toEqual([
			0, 0, 0,
		]);
	});

	it('truncates degrees of freedom for the coverage factor', () => {
		check(id, 'u_c(l)', length.standardUncertainty);
		// The recomputed figure takes 50 mm for the standard's length in the small terms, the printed one rounded parts.
		check(id, 'nu_eff(l)', length.dof, 1e-4);
		check(id, 'nu_eff(l) truncated', Math.floor(length.dof));
		check(id, 'k = t_99(16)', length.coverageFactor);
		check(id, 'U_99', length.expandedUncertainty);
	});
});

describe(titleOf('gum-h2-approach1'), () => {
	const id = 'gum-h2-approach1';
	const rows = gumH.cases.find((each) => each.id === id)!.data!.rows;
	const column = (k: number, factor = 1) => rows.map((row) => row[k]! * factor);
	const readings = { V: column(0), I: column(1, 1e-3), phi: column(2) };
	const sheet = new Sheet();
	for (const [name, values] of Object.entries(readings)) {
		const { mean, distribution } = sure(repeated(values));
		sheet.input(name, mean, distribution);
	}
	sheet
		.correlated('V', 'I', coefficient(readings.V, readings.I))
		.correlated('V', 'phi', coefficient(readings.V, readings.phi))
		.correlated('I', 'phi', coefficient(readings.I, readings.phi))
		.line('Z', ['div', 'V', 'I'])
		.line('R', ['mul', 'Z', ['cos', 'phi']])
		.line('X', ['mul', 'Z', ['sin', 'phi']]);

	it('gives means, their uncertainties and correlations', () => {
		check(id, 'mean V', sheet.value('V'));
		check(id, 'mean I', sheet.value('I') * 1e3);
		check(id, 'mean phi', sheet.value('phi'));
		check(id, 'u(V)', sheet.uncertainty('V').standardUncertainty);
		check(id, 'u(I)', sheet.uncertainty('I').standardUncertainty * 1e3);
		check(id, 'u(phi)', sheet.uncertainty('phi').standardUncertainty);
		check(id, 'r(V,I)', coefficient(readings.V, readings.I));
	});

	it('carries the correlations into resistance, reactance and impedance', () => {
		for (const name of ['R', 'X', 'Z']) {
			check(id, name, sheet.value(name));
			const u = sheet.uncertainty(name).standardUncertainty;
			check(id, `u(${name})`, u);
			check(id, `u(${name})/${name}`, u / sheet.value(name));
		}
	});

	it('keeps the four degrees of freedom of readings taken together', () => {
		for (const name of ['R', 'X', 'Z']) expect(sheet.uncertainty(name).dof).toBeCloseTo(4, 9);
	});
});

describe(titleOf('gum-h3-fit'), () => {
	it('predicts from correlated coefficients', () => {
		const sheet = new Sheet()
			.input('y1', -0.171203790131, student(0.00287759783516, 9))
			.input('y2', 0.00218269773989, student(0.000667938773228, 9))
			.correlated('y1', 'y2', -0.930429603093)
			.line('b', ['add', 'y1', ['mul', 'y2', 30 - 20]]);
		check('gum-h3-fit', 'b(30 degC)', sheet.value('b'));
		check('gum-h3-fit', 'u[b(30 degC)]', sheet.uncertainty('b').standardUncertainty);
		check('gum-h3-fit', 'degrees of freedom', sheet.uncertainty('b').dof);
	});
});

describe(titleOf('gum-table-g2'), () => {
	const sigmas: Record<string, number> = { '68.27': 1, '95.45': 2, '99.73': 3 };

	it('has every printed coverage factor', () => {
		for (const { quantity } of figuresOf('gum-table-g2')) {
			const [, percent = '', nu = ''] = /^t_([\d.]+)\((\w+)\)$/.exec(quantity) ?? [];
			const k = sigmas[percent];
			const p = k ? 2 * normalProbability(k) - 1 : Number(percent) / 100;
			const dof = Number.isFinite(Number(nu)) ? Number(nu) : Infinity;
			check('gum-table-g2', quantity, coverageFactor(p, dof));
		}
	});
});

describe(titleOf('gum-table-g1'), () => {
	it.each(figuresOf('gum-table-g1'))('$quantity is $published', ({ quantity }) => {
		const percent = Number(/[\d.]+/.exec(quantity)![0]);
		// The table's 68.27, 95.45 and 99.73 % are rounded; they stand for 1, 2 and 3 standard deviations.
		const exact = { 68.27: 1, 95.45: 2, 99.73: 3 }[percent];
		const p = exact ? 2 * normalProbability(exact) - 1 : percent / 100;
		check('gum-table-g1', quantity, coverageFactor(p, Infinity));
	});
});

describe('Effective degrees of freedom', () => {
	it('do not change where an exact value is added', () => {
		const sheet = new Sheet().input('x', 1, student(0.1, 7)).line('y', ['add', 'x', 5]);
		expect(uncertaintyOf(sheet.propagated('y'), sheet.doubts, 0.95).dof).toBeCloseTo(7, 12);
	});
});

/** Correlation coefficient of the means of readings taken together (JCGM 100:2008, 5.2.3). */
function coefficient(x: number[], y: number[]): number {
	const mean = (values: number[]) => values.reduce((sum, value) => sum + value) / values.length;
	const [mx, my] = [mean(x), mean(y)];
	const sum = (f: (i: number) => number) => x.reduce((total, _, i) => total + f(i), 0);
	const shared = sum((i) => (x[i]! - mx) * (y[i]! - my));
	return shared / Math.sqrt(sum((i) => (x[i]! - mx) ** 2) * sum((i) => (y[i]! - my) ** 2));
}
