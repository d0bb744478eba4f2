import type { Quantity, Readout } from '$lib/calc/results';
import type { Delta, FigureChange, FormulaChange } from '$lib/schemas/comparison';
import { align, pairs } from './alignment';
import { deltaOf, isSame, type Amount } from './amounts';
import { partsOf } from './words';
import { codeOf, linesOf, spelled, type Definition, type Material } from './written';

/** A definition as each side has it. */
export interface Twin {
	from: Definition | undefined;
	to: Definition | undefined;
}

/** Definitions of both sides side by side, in the order of the later sheet; those that went stand behind. */
export function twinsOf(
	from: ReadonlyMap<string, Definition>,
	to: ReadonlyMap<string, Definition>,
	renamed: ReadonlyMap<string, string>,
): Twin[] {
	const former = new Map([...renamed].map(([old, name]) => [name, old]));
	const twins = [...to.values()].map((one): Twin => ({
		from: from.get(former.get(one.name) ?? one.name),
		to: one,
	}));
	const gone = [...from.values()].filter(({ name }) => !to.has(name) && !renamed.has(name));
	return [...twins, ...gone.map((one): Twin => ({ from: one, to: undefined }))];
}

/** A value that a line states: it is computed from no other. */
export function isInput({ from, to }: Twin): boolean {
	const known = [from?.quantity, to?.quantity].filter((one) => one !== undefined);
	return known.every(({ dependsOn }) => dependsOn.length === 0);
}

/** How the figure of a definition moved; undefined where it is the same. */
export function figureChange({ from, to }: Twin): FigureChange | undefined {
	const place = to ?? from;
	if (!place || (!from?.quantity && !to?.quantity)) return undefined;
	const change = !from ? 'added' : !to ? 'removed' : 'moved';
	const value = valueDelta(from?.quantity, to?.quantity);
	const doubt = deltaOf(doubtOf(from?.quantity), doubtOf(to?.quantity)) ?? dofDelta(from, to);
	if (change === 'moved' && !value && !doubt) return undefined;
	return {
		name: place.name,
		named: true,
		...formerName(from, to),
		change,
		from: from?.quantity?.readout ?? null,
		to: to?.quantity?.readout ?? null,
		description: (to?.quantity ?? from?.quantity)?.description ?? '',
		...(value && { value }),
		...(doubt && { doubt }),
		place: { cell: place.cell, line: place.line },
	};
}

function valueDelta(from: Quantity | undefined, to: Quantity | undefined): Delta | undefined {
	const [a, b] = [amountOf(from), amountOf(to)];
	if (a && b) return deltaOf(a, b);
	const shown = {
		from: from ? figureText(from.readout) : null,
		to: to ? figureText(to.readout) : null,
	};
	if (from && to && isSameList(from, to)) return undefined;
	return { ...shown, difference: null, relative: null };
}

function amountOf(quantity: Quantity | undefined): Amount | null {
	if (!quantity || quantity.value === null) return null;
	const { value, unit, readout } = quantity;
	return { value, unit, shown: figureText(readout), interval: false };
}

function doubtOf(quantity: Quantity | undefined): Amount | null {
	if (quantity?.expandedUncertainty === undefined) return null;
	const { expandedUncertainty: value, unit, readout } = quantity;
	const shown = `±\u00a0${readout.doubt ?? ''}${readout.unit === '' ? '' : `\u00a0${readout.unit}`}`;
	return { value, unit, shown, interval: true };
}

/** Another number of degrees of freedom is another doubt, although its half-width may be the same. */
function dofDelta(from: Definition | undefined, to: Definition | undefined): Delta | undefined {
	const [a, b] = [from?.quantity?.degreesOfFreedom, to?.quantity?.degreesOfFreedom];
	if (a === undefined || b === undefined || a === b) return undefined;
	if (a !== null && b !== null && isSame(a, b)) return undefined;
	const text = (dof: number | null) =>
		`${dof === null ? '∞' : Number(dof.toPrecision(3))} degrees of freedom`;
	return { from: text(a), to: text(b), difference: null, relative: null };
}

/** Lists, truths and texts are compared member by member or as they are shown. */
function isSameList(from: Quantity, to: Quantity): boolean {
	const [a, b] = [from.values, to.values];
	if (!a || !b || from.unit !== to.unit) return from.text === to.text && a?.length === b?.length;
	return a.length === b.length && a.every((x, index) => isSame(x, b[index] ?? NaN));
}

function figureText({ number, unit }: Readout): string {
	return unit === '' ? number : `${number}\u00a0${unit}`;
}

/** How the formula of a definition changed; undefined where it says the same, by the names of the later side. */
export function formulaChange(
	{ from, to }: Twin,
	renamed: ReadonlyMap<string, string>,
	moved: boolean,
): FormulaChange | undefined {
	const place = to ?? from;
	if (!place || (from && to && spelled(from.code, renamed) === spelled(to.code))) return undefined;
	if ((!from || !to) && !place.isFunction) return undefined;
	return {
		name: place.name,
		...formerName(from, to),
		change: !from ? 'added' : !to ? 'removed' : 'changed',
		parts: partsOf(from?.code ?? '', to?.code ?? ''),
		moved,
		place: { cell: place.cell, line: place.line },
	};
}

function formerName(from: Definition | undefined, to: Definition | undefined) {
	return from && to && from.name !== to.name ? { formerName: from.name } : {};
}

/** Lines without a name whose formula stayed and whose figure did not. */
export function expressionChanges(
	from: Material,
	to: Material,
	renamed: ReadonlyMap<string, string>,
): FigureChange[] {
	const [before, after] = [linesOf(from.content), linesOf(to.content)];
	const readoutsOf = ({ results }: Material) =>
		new Map(
			results.lines
				.filter(({ kind }) => kind === 'expression')
				.map(({ cell, line, readout }) => [`${cell} ${line}`, readout]),
		);
	const [old, now] = [readoutsOf(from), readoutsOf(to)];
	return [...after].flatMap(([cell, lines]) => {
		const earlier = before.get(cell);
		if (!earlier || ![...now.keys()].some((key) => key.startsWith(`${cell} `))) return [];
		const spelledBefore = earlier.map((line) => spelled(codeOf(line), renamed));
		const spelledNow = lines.map((line) => spelled(codeOf(line)));
		return pairs(align(spelledBefore, spelledNow)).flatMap(([a, b]): FigureChange[] => {
			const [was, is] = [old.get(`${cell} ${a + 1}`), now.get(`${cell} ${b + 1}`)];
			if (spelledBefore[a] !== spelledNow[b] || !was || !is || was.text === is.text) return [];
			const value = { from: was.text, to: is.text, difference: null, relative: null };
			const place = { cell, line: b + 1 };
			const name = codeOf(lines[b] ?? '');
			return [
				{ name, named: false, change: 'moved', from: was, to: is, description: '', value, place },
			];
		});
	});
}
