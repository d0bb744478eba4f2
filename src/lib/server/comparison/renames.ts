import { align } from './alignment';
import { spelled, type Definition } from './written';

type Definitions = ReadonlyMap<string, Definition>;

/**
 * Names of the earlier side that only became other names: the line stands in the same cell in place of the other one and
 * its formula is the same, by the names that its own quantities got, and no line speaks of the other name. Whatever is
 * not as plain as that came and went.
 */
export function renamesOf(
	from: Definitions,
	to: Definitions,
	spokenBefore: ReadonlySet<string>,
	spokenNow: ReadonlySet<string>,
): Map<string, string> {
	const gone = [...from.values()].filter(({ name }) => !spokenNow.has(name));
	const come = [...to.values()].filter(({ name }) => !spokenBefore.has(name));
	const renamed = new Map<string, string>();
	if (gone.length === 0 || come.length === 0) return renamed;
	const places = exchangesOf(from, to);
	// A name may show only once the names in its formula are known.
	for (let before = -1; before < renamed.size;) {
		before = renamed.size;
		for (const old of gone) {
			if (renamed.has(old.name)) continue;
			const [found, ...others] = come.filter((one) => places(old, one) && alike(old, one, renamed));
			const taken = found && [...renamed.values()].includes(found.name);
			if (!found || others.length > 0 || taken) continue;
			const rivals = gone.filter((one) => places(one, found) && alike(one, found, renamed));
			if (rivals.length === 1) renamed.set(old.name, found.name);
		}
	}
	return renamed;
}

function alike(old: Definition, one: Definition, renamed: ReadonlyMap<string, string>): boolean {
	return (
		old.isFunction === one.isFunction && spelled(old.formula, renamed) === spelled(one.formula)
	);
}

/** Whether one definition stands where another stood: both lie between the same neighbours of one cell. */
function exchangesOf(from: Definitions, to: Definitions) {
	const cells = new Set([...from.values()].map(({ cell }) => cell));
	const placeOf = { from: new Map<string, string>(), to: new Map<string, string>() };
	for (const cell of cells) {
		const a = [...from.values()].filter((one) => one.cell === cell).map(({ name }) => name);
		const b = [...to.values()].filter((one) => one.cell === cell).map(({ name }) => name);
		for (const { kind, from: start, to: begin, length } of align(a, b)) {
			const place = `${cell} ${start} ${begin}`;
			for (const name of kind === 'deleted' ? a.slice(start, start + length) : [])
				placeOf.from.set(name, `${cell} ${start + length} ${begin}`);
			for (const name of kind === 'inserted' ? b.slice(begin, begin + length) : [])
				placeOf.to.set(name, place);
		}
	}
	return (old: Definition, one: Definition) => {
		const place = placeOf.from.get(old.name);
		return place !== undefined && place === placeOf.to.get(one.name);
	};
}
