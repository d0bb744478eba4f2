import { describe, expect, it } from 'vitest';
import { needsTrials } from './budget';
import { exact, propagate, type Propagated } from './propagate';
import { Remark } from './remarks';
import { TapeBuilder, type External, type Node } from './tape';
import { evaluateTape } from './values';

/** A line of one doubtful input, 2 ± 0.1, through what `write` makes of it. */
function through(write: (tape: TapeBuilder, x: Node) => Node, at = 2): Propagated {
	const tape = new TapeBuilder();
	const x = tape.binary('add', tape.constant(at), tape.input(0));
	return propagate(tape.finish(write(tape, x)), [], [0], [0.1]);
}

const cubed: External = { name: 'cubed', value: ([x = 0]) => x ** 3 };
const cubedWithSlope: External = {
	...cubed,
	slopes: ([x = 0], into) => {
		into[0] = 3 * x * x;
	},
};

describe('A tape builder', () => {
	it('folds constants and leaves out what is not needed', () => {
		const tape = new TapeBuilder();
		tape.argument(3);
		const sum = tape.binary('add', tape.constant(2), tape.constant(3));
		const built = tape.finish(tape.binary('mul', sum, tape.argument(0)));
		expect(built.ops).toHaveLength(3);
		expect(evaluateTape(built, [7], new Float64Array(3))).toBe(35);
	});

	it('reuses a node that computes the same', () => {
		const tape = new TapeBuilder();
		const first = tape.unary('sin', tape.argument(0));
		expect(tape.unary('sin', tape.argument(0))).toBe(first);
	});

	it('keeps zero and minus zero apart', () => {
		const tape = new TapeBuilder();
		expect(tape.constant(-0)).not.toBe(tape.constant(0));
	});

	it('turns a whole constant exponent into a power that negative numbers have', () => {
		const line = through((t, x) => t.binary('pow', t.unary('neg', x), t.constant(3)));
		expect(line.value).toBe(-8);
		expect(line.gradient[0]).toBe(-12);
	});
});

describe('A line', () => {
	it('without doubtful inputs is exact', () => {
		const tape = new TapeBuilder();
		const built = tape.finish(tape.unary('sqrt', tape.argument(0)));
		expect(propagate(built, [exact(9)], [], [])).toEqual(exact(3));
	});

	it('carries an external function by its own derivative', () => {
		const line = through((t, x) => t.call(cubedWithSlope, [x]));
		expect([line.value, line.gradient[0], line.remarks]).toEqual([8, 12, 0]);
	});

	it('takes differences where an external function has none, and says so', () => {
		const line = through((t, x) => t.call(cubed, [x]));
		expect(line.gradient[0]).toBeCloseTo(12, 7);
		expect(line.remarks).toBe(Remark.differences);
	});

	it('finds the curvature of an external function', () => {
		const plain = through((t, x) => t.binary('powi', x, t.constant(3)));
		const external = through((t, x) => t.call(cubedWithSlope, [x]));
		expect(external.curvature![0]).toBeCloseTo(plain.curvature![0]!, 10);
		expect(external.curvature![1]).toBeCloseTo(plain.curvature![1]!, 10);
		const differences = through((t, x) => t.call(cubed, [x]));
		expect(differences.curvature![0]).toBeCloseTo(plain.curvature![0]!, 6);
	});

	it('marks a corner it stands on', () => {
		expect(through((t, x) => t.unary('abs', x), 0).remarks).toBe(Remark.corner);
		expect(through((t, x) => t.unary('abs', x), 1).remarks).toBe(0);
		expect(through((t, x) => t.binary('max', x, t.constant(2))).remarks).toBe(Remark.corner);
	});

	it('marks a step that a doubtful value goes through', () => {
		const line = through((t, x) => t.unary('floor', t.binary('mul', x, t.constant(1.25))));
		expect([line.value, line.gradient[0], line.remarks]).toEqual([2, 0, Remark.step]);
		expect(through((t) => t.unary('floor', t.argument(0))).remarks & Remark.step).toBe(0);
	});

	it('follows the branch that holds', () => {
		const line = through((t, x) =>
			t.select(t.binary('less', x, t.constant(3)), t.binary('mul', x, x), t.unary('neg', x)),
		);
		expect([line.value, line.gradient[0], line.remarks]).toEqual([4, 4, Remark.step]);
	});

	it('passes the square root of zero on as a slope without bound', () => {
		const line = through((t, x) => t.unary('sqrt', x), 0);
		expect(line.gradient[0]).toBe(Infinity);
	});

	it('asks for trials where second order changes its uncertainty by more than a hundredth', () => {
		const doubts = { uncertainties: [0.1], dofs: [Infinity] };
		const square = (at: number) => through((t, x) => t.binary('powi', x, t.constant(2)), at);
		expect(needsTrials(square(2), doubts)).toBe(false);
		expect(needsTrials(square(0.3), doubts)).toBe(true);
		expect(needsTrials(square(0), doubts)).toBe(true);
	});
});
