import type { SweepLimit, Verdict } from '../results';

/** Width of the bracket that a boundary is narrowed down to, as a share of where it is searched. */
const narrow = 1e-9;

/**
 * The place between two values where something changes that holds at the first and not at the second. `height` is a
 * number that is zero near there; it makes the search short and decides nothing.
 */
function boundary(
	low: number,
	high: number,
	holds: (x: number) => boolean,
	height: (x: number) => number | null = () => null,
): Between {
	let [before, behind] = [low, high];
	let [left, right] = [height(low), height(high)];
	const least = narrow * (high - low);
	for (let i = 0; i < 80 && behind - before > least; i++) {
		const middle = before + (behind - before) / 2;
		if (middle <= before || middle >= behind) break;
		const line = left === null || right === null || i % 4 === 3 ? NaN : left / (left - right);
		const guess = line > 0 && line < 1 ? before + line * (behind - before) : middle;
		// A guess at the very edge of the bracket would not narrow it.
		const x = Math.min(behind - least / 2, Math.max(before + least / 2, guess));
		if (holds(x)) [before, left] = [x, height(x)];
		else [behind, right] = [x, height(x)];
	}
	return { before, behind };
}

/** The last value that is known to be as it was, and the first that is not. */
interface Between {
	before: number;
	behind: number;
}

type Stretch = Omit<SweepLimit['stretches'][number], 'text'>;
type Known = Verdict | null;

/** Verdicts within one step of the grid: more of them are not told apart. */
const mostWithin = 4;

/**
 * Parts of a range with one verdict each. `at` gives the verdict at any value; it is asked between points that differ.
 * `heights` are numbers of which one is zero where a verdict changes.
 */
export function stretchesOf(
	x: readonly number[],
	verdicts: readonly Known[],
	at: (x: number) => Known,
	heights: readonly ((x: number) => number | null)[] = [],
): Stretch[] {
	const stretches: Stretch[] = [];
	let from = x[0] ?? 0;
	for (let i = 0; i + 1 < x.length; i++) {
		let low = x[i]!;
		let verdict = verdicts[i] ?? null;
		const [high, last] = [x[i + 1]!, verdicts[i + 1] ?? null];
		for (let n = 0; verdict !== last && n < mostWithin; n++) {
			const held = verdict;
			const near = heights.find((height) => (height(low) ?? 0) * (height(high) ?? 0) < 0);
			const { behind } = boundary(low, high, (value) => at(value) === held, near);
			stretches.push({ from, to: behind, verdict });
			from = low = behind;
			verdict = behind >= high ? last : at(behind);
		}
		if (verdict !== last) {
			stretches.push({ from, to: high, verdict });
			from = high;
		}
	}
	return [...stretches, { from, to: x.at(-1) ?? from, verdict: verdicts.at(-1) ?? null }];
}

/** Values at which a difference changes its sign; `at` gives the difference at any value. */
export function crossingsOf(
	x: readonly number[],
	differences: readonly (number | null)[],
	at: (x: number) => number | null,
): number[] {
	const found: number[] = [];
	for (let i = 0; i + 1 < x.length; i++) {
		const [left, right] = [differences[i] ?? null, differences[i + 1] ?? null];
		if (left === null || right === null) continue;
		if (left === 0 && (i === 0 || differences[i - 1] === null)) found.push(x[i]!);
		if (right === 0) found.push(x[i + 1]!);
		else if (left * right < 0) {
			const sign = Math.sign(left);
			found.push(boundary(x[i]!, x[i + 1]!, (v) => Math.sign(at(v) ?? 0) === sign, at).behind);
		}
	}
	return found;
}
