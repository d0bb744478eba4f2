/**
 * Lines of a note of 200: 30 resistors, exact or with a tolerance each, and 170 stages of a ladder of loaded dividers,
 * of which each takes the one before.
 */
export function lines200(doubtful: boolean): string[] {
	const resistors = Array.from({ length: 30 }, (_, i) => {
		const value = `${i + 1}0 kohm`;
		return `R_${i} = ${doubtful ? `tolerance(${value}, 1 %)` : value}`;
	});
	const stages = Array.from({ length: 170 }, (_, i) => {
		const before = i === 0 ? '5 V' : `V_${i - 1}`;
		const [a, b, c] = [i % 30, (7 * i + 3) % 30, (11 * i + 5) % 30].map((k) => `R_${k}`);
		const low = `(${b} * ${c} / (${b} + ${c}))`;
		const mismatch = `0.1 V * sqrt(${a} * ${b}) / (${a} + ${b}) - 0.02 V * ${c} / (${a} + ${b})`;
		return `V_${i} = ${before} * ${low} / (${a} + ${low}) * (1 + 0.003 * ${a} / ${c}) + ${mismatch}`;
	});
	return [...resistors, ...stages];
}

/** The last quantity. */
export const last200 = 'V_169';
