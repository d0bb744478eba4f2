import { describe, expect, it } from 'vitest';
import { compute } from '../support/notes';
import { hasProgram, printed } from '../support/programs';

// ngspice 39 (Debian 12) as an independent solver of circuits; the circuits are common practice.
const present = hasProgram('ngspice', 'ngspice', 'The comparison with ngspice');

/** The number that a simulation prints behind a name. */
function simulated(circuit: string, commands: string, name: string): number {
	const deck = `* circuit\n${circuit}\n.control\nset numdgt=12\n${commands}\n.endc\n.end\n`;
	const output = printed('ngspice', ['-b'], deck);
	const found = output.split('\n').find((line) => line.startsWith(name));
	if (found === undefined) throw new Error(`ngspice prints no ${name}:\n${output}`);
	return Number(
		found
			.slice(found.indexOf('=') + 1)
			.trim()
			.split(/\s/)[0],
	);
}

function ours(formula: string): number {
	const { quantities, errors } = compute(`x = ${formula}`);
	expect(errors).toEqual([]);
	return quantities.x?.value ?? NaN;
}

function expectRatio(value: number, reference: number, tolerance: number): void {
	expect(Math.abs(value / reference - 1), `${value} beside ${reference}`).toBeLessThan(tolerance);
}

const loaded = 'V1 in 0 DC 15\nR1 in out 100k\nR2 out 0 27k\nRL out 0 1meg';
const rc = 'V1 in 0 PULSE(0 1 0 1f 1f 1 2)\nR1 in out 10k\nC1 out 0 12p';

describe.skipIf(!present)('ngspice', () => {
	it('gives the output of a loaded divider', () => {
		const output = simulated(loaded, 'op\nprint v(out)', 'v(out)');
		expectRatio(ours('divider(15 V, 100 kohm, 27 kohm, 1 Mohm)'), output, 1e-10);
	});

	it('gives the source resistance of a loaded divider', () => {
		const resistance = simulated(loaded, 'tf v(out) V1\nprint all', 'output_impedance_at_v(out)');
		expectRatio(ours('parallel(100 kohm, 27 kohm, 1 Mohm)'), resistance, 1e-10);
	});

	it.each([8, 12])('gives the time in which an input settles to half a step of %i bits', (bits) => {
		const level = 1 - 0.5 / 2 ** bits;
		const commands = `tran 0.2n 2u 0 0.2n\nmeas tran settled when v(out)=${level}`;
		const options = '.options reltol=1e-6 abstol=1e-18 vntol=1e-12';
		const time = simulated(`${rc}\n${options}`, commands, 'settled');
		// Seven digits are printed, and each of 0.2 ns steps of 120 ns adds its error.
		expectRatio(ours(`settling(10 kohm, 12 pF, ${bits})`), time, 2e-6);
	});

	it('gives the thermal noise of a resistor over a band', () => {
		const circuit = 'V1 in 0 DC 0 AC 1\nR1 in out 10k';
		const commands = 'noise v(out) V1 lin 2 1k 11k\nsetplot noise2\nprint onoise_total';
		// At its 27 °C, with the Boltzmann constant of 2014.
		const noise = simulated(circuit, commands, 'onoise_total');
		expectRatio(ours('johnson(10 kohm, 27 degC, 10 kHz)'), noise, 1e-6);
	});

	it('gives what a divider chosen by the language gives', () => {
		const { quantities } = compute('R = findDivider(15 V, 3.3 V, E24, 5 kohm, 1 mA)');
		const [upper, lower] = quantities.R?.values ?? [];
		const circuit = `V1 in 0 DC 15\nR1 in out ${upper}\nR2 out 0 ${lower}`;
		const output = simulated(circuit, 'op\nprint v(out)', 'v(out)');
		expect(Math.abs(output / 3.3 - 1)).toBeLessThan(0.01);
		expect(simulated(circuit, 'tf v(out) V1\nprint all', 'output_impedance')).toBeLessThan(5_000);
		expect(Math.abs(simulated(circuit, 'op\nprint i(V1)', 'i(v1)'))).toBeLessThan(1e-3);
	});
});
