import { describe, expect, it } from 'vitest';
import { normal } from '$lib/calc/doubt/distributions/normal';
import { rectangular } from '$lib/calc/doubt/distributions/rectangular';
import { repeated } from '$lib/calc/doubt/distributions/repeated';
import { triangular } from '$lib/calc/doubt/distributions/triangular';
import { rounded } from '$lib/calc/doubt/display';
import { simulate } from '$lib/calc/doubt/monte-carlo';
import ea402 from '../data/ea402.json';
import { check, titleOf } from './published';
import { Sheet, sure } from './sheet';

describe(titleOf('ea-s3'), () => {
	const id = 'ea-s3';
	const { rows } = ea402.cases.find((each) => each.id === id)!.data!;
	const ratio = sure(repeated(rows.map((row) => row[0]!)));
	const sheet = new Sheet()
		.input('RS', 10_000.053, normal(5e-3, 2))
		.input('dRD', 0.02, rectangular(10e-3))
		.input('dRTS', 0, rectangular(2.75e-3))
		.input('dRTX', 0, rectangular(5.5e-3))
		.input('rC', 1, triangular(1e-6))
		.input('r', ratio.mean, ratio.distribution)
		.line('standard', ['add', ['add', 'RS', 'dRD'], 'dRTS'])
		.line('RX', ['sub', ['mul', ['mul', 'standard', 'rC'], 'r'], 'dRTX']);

	it('gives every figure of the budget', () => {
		const { standardUncertainty, expandedUncertainty } = sheet.uncertainty('RX');
		check(id, 'mean ratio r', ratio.mean);
		check(id, 's(mean r)', ratio.distribution.uncertainty);
		check(id, 's(r)', ratio.distribution.uncertainty * Math.sqrt(5));
		check(id, 'R_X', sheet.value('RX'));
		check(id, 'u(R_S)', sheet.contribution('RX', 'RS') * 1e3);
		check(id, 'u(dR_D)', sheet.contribution('RX', 'dRD') * 1e3);
		check(id, 'u(dR_TS)', sheet.contribution('RX', 'dRTS') * 1e3);
		check(id, 'u(dR_TX)', sheet.contribution('RX', 'dRTX') * 1e3);
		check(id, 'contribution r_C', sheet.contribution('RX', 'rC') * 1e3);
		check(id, 'contribution r', sheet.contribution('RX', 'r') * 1e3);
		check(id, 'u(R_X)', standardUncertainty * 1e3);
		check(id, 'U (k = 2)', 2 * standardUncertainty * 1e3);
		expect(expandedUncertainty).toBeCloseTo(1.96 * standardUncertainty, 4);
	});

	it('is written to the place of its uncertainty', () => {
		const { standardUncertainty } = sheet.uncertainty('RX');
		expect(rounded(sheet.value('RX'), 2 * standardUncertainty)).toMatchObject({
			value: '10000.178',
			uncertainty: '0.017',
		});
	});
});

describe(titleOf('ea-s9'), () => {
	const id = 'ea-s9';
	const sheet = new Sheet()
		.input('VS', 100, normal(2e-3, 2))
		.input('dViX', 0, rectangular(0.05))
		.input('dVS', 0, rectangular(0.011))
		.line('EX', ['sub', ['add', ['sub', 100.1, 'VS'], 'dViX'], 'dVS']);

	it('gives every contribution', () => {
		check(id, 'E_X', sheet.value('EX'));
		check(id, 'u(V_S)', sheet.contribution('EX', 'VS'));
		check(id, 'u(dV_iX)', sheet.contribution('EX', 'dViX'));
		check(id, 'u(dV_S)', sheet.contribution('EX', 'dVS'));
		check(id, 'u(E_X)', sheet.uncertainty('EX').standardUncertainty);
	});

	it('has the coverage interval of a dominant rectangular input by trials', () => {
		// Print takes k from the rectangular distribution alone; the exact convolution, which trials draw, gives 1.710.
		const [result] = simulate(sheet.model, [sheet.place('EX')], { seed: 3, trials: 400_000 });
		const { symmetric } = result!;
		const { half_width_95_convolution_V: exact } = ea402.cases.find(
			(each) => each.id === id,
		)!.exact!;
		expect((symmetric[1] - symmetric[0]) / 2).toBeCloseTo(exact, 3);
		check(id, 'U', (symmetric[1] - symmetric[0]) / 2);
	});

	it('does not show what binary numbers make of a difference', () => {
		expect(rounded(sheet.value('EX'), 0.05, 1, 1)).toMatchObject({
			value: '0.10',
			uncertainty: '0.05',
		});
	});
});

describe(titleOf('ea-s5'), () => {
	it('adds contributions by their squares', () => {
		const [{ values: parts }] = ea402.cases.find((each) => each.id === 'ea-s5')!
			.inputs as unknown as [{ values: [u: number, c: number][] }];
		const sheet = new Sheet();
		parts.forEach(([u], i) => sheet.input(`x${i}`, 0, normal(u)));
		parts.forEach(([, c], i) =>
			sheet.line(`y${i}`, i === 0 ? ['mul', c, 'x0'] : ['add', `y${i - 1}`, ['mul', c, `x${i}`]]),
		);
		const { standardUncertainty } = sheet.uncertainty(`y${parts.length - 1}`);
		check('ea-s5', 'u', standardUncertainty);
		check('ea-s5', 'U (k = 2)', 2 * standardUncertainty);
	});
});
