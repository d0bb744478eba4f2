import { member, series } from '../functions/series';
import { refuse, refuseNotPositive, type Refusal } from './refusal';

/** One part, or two equal ones in series or in parallel. */
export interface Arm {
	/** Value of the part, or of each of the two. */
	part: number;
	joined: 'single' | 'series' | 'parallel';
	/** Of the whole arm. */
	resistance: number;
}

export interface Stock {
	/** E3 to E192. */
	series: string;
	/** Smallest and largest part to consider; 100 Ω to 1 MΩ where nothing is said. */
	lowest?: number;
	highest?: number;
}

/** Decades a search covers at most. */
const mostDecades = 12;

/** Every part of a series within a range, in rising order. */
export function singles({ series: name, lowest = 100, highest = 1e6 }: Stock): Arm[] | Refusal {
	const values = series.get(name);
	if (!values)
		return refuse('text', `There is no series ${name}`, {
			argument: 'series',
			mend: `Series are ${[...series.keys()].join(', ')}.`,
		});
	const fault = refuseNotPositive({ lowest, highest });
	if (fault) return fault;
	const first = Math.floor(Math.log10(lowest));
	if (highest < lowest || highest / lowest > 10 ** mostDecades)
		return refuse('outOfRange', `Parts must lie within up to ${mostDecades} decades, rising`, {
			argument: 'highest',
		});
	const arms: Arm[] = [];
	for (let index = 0; ; index++) {
		const part = member(name, index, first);
		if (part > highest) break;
		if (part >= lowest) arms.push({ part, joined: 'single', resistance: part });
	}
	return arms;
}

/** The same parts twice in series and in parallel, but for sums that a single part has already; in rising order. */
export function doubled(parts: readonly Arm[]): Arm[] {
	const have = new Set(parts.map(({ resistance }) => resistance.toPrecision(9)));
	return parts
		.flatMap<Arm>(({ part }) => [
			{ part, joined: 'series', resistance: 2 * part },
			{ part, joined: 'parallel', resistance: part / 2 },
		])
		.filter(({ resistance }) => !have.has(resistance.toPrecision(9)))
		.sort((a, b) => a.resistance - b.resistance);
}
