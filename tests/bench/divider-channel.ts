import { normal } from '$lib/calc/doubt/distributions/normal';
import { rectangular } from '$lib/calc/doubt/distributions/rectangular';
import type { Distribution, ParameterFault } from '$lib/calc/doubt/distributions/distribution';
import type { Model, Step } from '$lib/calc/doubt/model';
import { TapeBuilder, type Node } from '$lib/calc/doubt/tape';

const sure = (made: Distribution | ParameterFault): Distribution => {
	if ('fault' in made) throw new Error(made.message);
	return made;
};

type Write = (tape: TapeBuilder) => Node;

/** A divider before a converter, with twelve doubtful inputs: an invented channel. The last line is its result. */
export function dividerChannel(): { model: Model; output: number } {
	const inputs = [
		normal(1e-3), // 0 supply noise, V
		rectangular(0.01), // 1 tolerance of the upper resistor, relative
		rectangular(0.01), // 2 tolerance of the lower resistor, relative
		rectangular(1e-4), // 3 temperature coefficient of the upper one, 1/K
		rectangular(1e-4), // 4 temperature coefficient of the lower one, 1/K
		rectangular(30), // 5 temperature above the reference, K
		rectangular(2e6), // 6 input resistance of the converter, Ω
		rectangular(5e-8), // 7 leakage current, A
		rectangular(1e-3), // 8 gain error, relative
		normal(5e-4), // 9 offset, V
		rectangular(6e-4), // 10 non-linearity, V
		rectangular(3e-4), // 11 quantisation, V
	].map(sure);
	const line = (args: number[], own: number[], write: Write): Step => {
		const tape = new TapeBuilder();
		return { tape: tape.finish(write(tape)), args, inputs: own };
	};
	const about = (value: number) => (t: TapeBuilder) =>
		t.binary('add', t.constant(value), t.input(0));
	const warmed = (ohms: number) => (t: TapeBuilder) => {
		const one = t.constant(1);
		const tolerance = t.binary('add', one, t.input(0));
		const drift = t.binary('add', one, t.binary('mul', t.input(1), t.argument(0)));
		return t.binary('mul', t.binary('mul', t.constant(ohms), tolerance), drift);
	};
	const product = (t: TapeBuilder, x: number, y: number) =>
		t.binary('mul', t.argument(x), t.argument(y));
	const parallel = (t: TapeBuilder) =>
		t.binary('div', product(t, 0, 1), t.binary('add', t.argument(0), t.argument(1)));
	const steps = [
		line([], [0], about(24)), // 0 supply
		line([], [5], (t) => t.input(0)), // 1 temperature difference
		line([1], [1, 3], warmed(470e3)), // 2 upper resistor
		line([1], [2, 4], warmed(47e3)), // 3 lower resistor
		line([], [6], about(10e6)), // 4 input resistance
		line([3, 4], [], parallel), // 5 loaded lower resistor
		line([2, 5], [], parallel), // 6 source resistance
		line([0, 5, 2], [], (t) =>
			t.binary('div', product(t, 0, 1), t.binary('add', t.argument(1), t.argument(2))),
		), // 7 divided voltage
		line([7, 6], [7, 8, 9, 10, 11], (t) => {
			const leaky = t.binary('sub', t.argument(0), t.binary('mul', t.input(0), t.argument(1)));
			const gained = t.binary('mul', leaky, t.binary('add', t.constant(1), t.input(1)));
			return [2, 3, 4].reduce((sum, k) => t.binary('add', sum, t.input(k)), gained);
		}), // 8 converted voltage
		line([8], [], (t) => t.binary('div', t.argument(0), t.constant(47 / 517))), // 9 supply as measured
	];
	return { model: { steps, inputs }, output: 9 };
}
