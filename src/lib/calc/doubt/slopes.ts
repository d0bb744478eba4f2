import { Op } from './operations';

/** Writes first, second and third derivative of an operation of one operand at x, where its value is v, into `d`. */
export function unarySlopes(op: number, x: number, v: number, d: Float64Array): void {
	switch (op) {
		case Op.neg:
			return put(d, -1, 0, 0);
		case Op.abs:
			return put(d, Math.sign(x), 0, 0);
		case Op.sqrt:
			return put(d, 0.5 / v, -0.25 / (v * x), 0.375 / (v * x * x));
		case Op.cbrt: {
			const first = 1 / (3 * v * v);
			return put(d, first, (-2 / 3) * (first / x), ((10 / 9) * (first / x)) / x);
		}
		case Op.exp:
			return put(d, v, v, v);
		case Op.expm1:
			return put(d, v + 1, v + 1, v + 1);
		case Op.log:
			return logSlopes(1, x, d);
		case Op.log10:
			return logSlopes(Math.LOG10E, x, d);
		case Op.log2:
			return logSlopes(Math.LOG2E, x, d);
		case Op.log1p:
			return logSlopes(1, 1 + x, d);
		case Op.sin: {
			const cos = Math.cos(x);
			return put(d, cos, -v, -cos);
		}
		case Op.cos: {
			const sin = Math.sin(x);
			return put(d, -sin, -v, sin);
		}
		case Op.tan: {
			const first = 1 + v * v;
			return put(d, first, 2 * v * first, 2 * first * (1 + 3 * v * v));
		}
		case Op.asin:
			return arcSlopes(1, x, d);
		case Op.acos:
			return arcSlopes(-1, x, d);
		case Op.atan: {
			const first = 1 / (1 + x * x);
			return put(d, first, -2 * x * first * first, (6 * x * x - 2) * first ** 3);
		}
		case Op.sinh: {
			const cosh = Math.cosh(x);
			return put(d, cosh, v, cosh);
		}
		case Op.cosh: {
			const sinh = Math.sinh(x);
			return put(d, sinh, v, sinh);
		}
		case Op.tanh: {
			const first = 1 - v * v;
			return put(d, first, -2 * v * first, (6 * v * v - 2) * first);
		}
		default:
			return put(d, 0, 0, 0);
	}
}

/** Writes the first three derivatives of x^y by x, y constant, into `d`. */
export function powerSlopes(x: number, y: number, d: Float64Array): void {
	const second = y * (y - 1);
	const third = second * (y - 2);
	d[0] = y === 0 ? 0 : y * Math.pow(x, y - 1);
	d[1] = second === 0 ? 0 : second * Math.pow(x, y - 2);
	d[2] = third === 0 ? 0 : third * Math.pow(x, y - 3);
}

/** Writes the derivatives by both operands of an operation whose value is v into `d`. */
export function binarySlopes(op: number, x: number, y: number, v: number, d: Float64Array): void {
	switch (op) {
		case Op.add:
			return put(d, 1, 1);
		case Op.sub:
			return put(d, 1, -1);
		case Op.mul:
			return put(d, y, x);
		case Op.div:
			return put(d, 1 / y, -v / y);
		case Op.powi:
			return put(d, y === 0 ? 0 : y * Math.pow(x, y - 1), 0);
		case Op.pow:
			return put(d, y === 0 ? 0 : y * Math.pow(x, y - 1), x === 0 && y > 0 ? 0 : v * Math.log(x));
		case Op.atan2: {
			const square = x * x + y * y;
			return put(d, y / square, -x / square);
		}
		case Op.hypot:
			return put(d, x / v, y / v);
		case Op.mod:
			return put(d, 1, y === 0 ? 0 : -Math.floor(x / y));
		case Op.min:
			return x <= y ? put(d, 1, 0) : put(d, 0, 1);
		case Op.max:
			return x >= y ? put(d, 1, 0) : put(d, 0, 1);
		default:
			return put(d, 0, 0);
	}
}

function put(d: Float64Array, first: number, second: number, third = 0): void {
	d[0] = first;
	d[1] = second;
	d[2] = third;
}

function logSlopes(factor: number, x: number, d: Float64Array): void {
	const first = factor / x;
	put(d, first, -first / x, (2 * first) / (x * x));
}

function arcSlopes(factor: number, x: number, d: Float64Array): void {
	const first = 1 / Math.sqrt(1 - x * x);
	put(d, factor * first, factor * x * first ** 3, factor * (1 + 2 * x * x) * first ** 5);
}
