import type { Arm } from '$lib/calc/tables/arms';
import type { Divider, DividerQuestion } from '$lib/calc/tables/divider-question';
import { typed } from './amounts';

/** Worked lines of a divider, under names that are free. `tolerance` is a share such as `0.1 %`. */
export function dividerLines(
	{ upper, lower }: Divider,
	{ inputVoltage, load, series }: Pick<DividerQuestion, 'inputVoltage' | 'load' | 'series'>,
	tolerance: string,
	taken: ReadonlySet<string>,
): string {
	const names = new Set(taken);
	const input = free('V_in', names);
	const up = freeNumber(names);
	const low = freeNumber(names);
	const output = free('V_out', names);
	const ratio = free('k_div', names);
	const loaded = load === undefined ? undefined : free('R_load', names);
	return [
		`${input} = ${typed(inputVoltage, 'V')}  # input of the divider`,
		...armLines(up, upper, 'upper arm', series, tolerance),
		...armLines(low, lower, 'lower arm', series, tolerance),
		...(loaded && load !== undefined
			? [`${loaded} = ${typed(load, 'ohm')}  # load of the divider`]
			: []),
		`${output} = divider(${[input, up, low, ...(loaded ? [loaded] : [])].join(', ')})  # output of the divider`,
		`${ratio} = ${output} / ${input}  # ratio of the divider`,
	].join('\n');
}

function armLines(
	name: string,
	{ part, joined }: Arm,
	role: string,
	series: string,
	tolerance: string,
): string[] {
	const stated = `tolerance(${typed(part, 'ohm')}, ${tolerance})`;
	if (joined === 'single') return [`${name} = ${stated}  # ${role}, ${series}`];
	// Two parts: each has a deviation of its own.
	const whole = joined === 'series' ? `${name}a + ${name}b` : `parallel(${name}a, ${name}b)`;
	return [
		`${name}a = ${stated}  # ${role}, first of two, ${series}`,
		`${name}b = ${stated}  # ${role}, second of two`,
		`${name} = ${whole}  # ${role}, in ${joined}`,
	];
}

/** The name, or with a number behind it where it is taken. */
function free(name: string, taken: Set<string>): string {
	let made = name;
	for (let n = 2; taken.has(made); n++) made = `${name}_${n}`;
	taken.add(made);
	return made;
}

/** The first of R_1, R_2 … that is free, also with an a or b behind it. */
function freeNumber(taken: Set<string>): string {
	let n = 1;
	while (['', 'a', 'b'].some((end) => taken.has(`R_${n}${end}`) || taken.has(`R${n}${end}`))) n++;
	taken.add(`R_${n}`);
	return `R_${n}`;
}
