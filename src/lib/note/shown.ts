import type { Display } from '$lib/calc/results';
import type * as Y from 'yjs';

/** `shown`: Y.Map of a quantity's name → { unit?, digits? }, how its readouts are set. */
export function shownOf(doc: Y.Doc): Y.Map<Display> {
	return doc.getMap<Display>('shown');
}

/** How readouts are set, by the name of the quantity; undefined where nobody chose anything. */
export function readShown(doc: Y.Doc): Record<string, Display> | undefined {
	const chosen = [...shownOf(doc)]
		.filter(([name, display]) => isShownName(name) && isDisplay(display))
		.map(([name, { unit, digits }]): [string, Display] => [
			name,
			{ ...(unit !== undefined && { unit }), ...(digits !== undefined && { digits }) },
		]);
	if (chosen.length === 0) return undefined;
	return Object.fromEntries(chosen.sort(([a], [b]) => (a < b ? -1 : 1)));
}

/** Most significant digits that a readout is set to. */
export const mostDigits = 12;

/** Whether a key of `shown` can be the name of a quantity. */
export function isShownName(name: string): boolean {
	return /^[\p{L}_][\p{L}\p{N}_]{0,99}$/u.test(name) && !(name in {});
}

/** Whether a value says how readouts are set. */
export function isDisplay(value: unknown): value is Display {
	if (typeof value !== 'object' || value === null || Array.isArray(value)) return false;
	const { unit, digits, ...others } = value as Record<string, unknown>;
	const isUnit = typeof unit === 'string' && /^[^\0\n]{1,60}$/.test(unit);
	const areDigits = Number.isInteger(digits) && Number(digits) >= 1 && Number(digits) <= mostDigits;
	const isSomething = unit !== undefined || digits !== undefined;
	return (
		isSomething &&
		Object.keys(others).length === 0 &&
		(unit === undefined || isUnit) &&
		(digits === undefined || areDigits)
	);
}

/** Chooses how a quantity's readouts are set; nothing chosen sets them as usual again. */
export function setShown(doc: Y.Doc, name: string, { unit, digits }: Display): void {
	const shown = shownOf(doc);
	const display = { ...(unit !== undefined && { unit }), ...(digits !== undefined && { digits }) };
	if (isShownName(name) && isDisplay(display)) shown.set(name, display);
	else shown.delete(name);
}

/** A quantity that gets another name keeps how its readouts are set. */
export function renameShown(doc: Y.Doc, name: string, next: string): void {
	const display = shownOf(doc).get(name);
	if (!display) return;
	shownOf(doc).delete(name);
	setShown(doc, next, display);
}

/** Makes a document set readouts as `wanted` says, by changes of what differs. */
export function matchShown(doc: Y.Doc, wanted: Readonly<Record<string, Display>>): void {
	const shown = shownOf(doc);
	for (const name of [...shown.keys()]) if (!Object.hasOwn(wanted, name)) shown.delete(name);
	for (const [name, display] of Object.entries(wanted)) {
		const { unit, digits } = shown.get(name) ?? {};
		if (unit !== display.unit || digits !== display.digits) setShown(doc, name, display);
	}
}
