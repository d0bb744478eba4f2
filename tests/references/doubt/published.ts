import { expect } from 'vitest';
import ea402 from '../data/ea402.json';
import gumH from '../data/gum-h.json';
import gumS1 from '../data/gum-s1.json';
import jcgm106 from '../data/jcgm106.json';

/** A printed figure and what the unrounded inputs give; `agrees` says whether print and recomputation do. */
export interface Figure {
	quantity: string;
	published: string | null;
	unit: string;
	recomputed: number;
	agrees?: boolean;
	note?: string;
}

interface Case {
	id: string;
	title: string;
	source: { document: string; locator: string };
	confirmed?: string;
	expected?: Figure[];
}

const cases: Case[] = [gumH, gumS1, ea402, jcgm106].flatMap((group) => group.cases as Case[]);

/** Title of a test: what it is and where it is printed. */
export function titleOf(id: string): string {
	const { title, source, confirmed } = find(id);
	return `${title}: ${source.document}, ${source.locator} (${confirmed ?? 'recomputed'})`;
}

export function figuresOf(id: string): Figure[] {
	return find(id).expected ?? [];
}

/**
 * Checks a computed figure, in the printed unit, to every printed digit. Where print and recomputation disagree, which
 * the case explains, it is checked against the recomputed figure, to `relative`.
 */
export function check(id: string, quantity: string, computed: number, relative = 1e-6): void {
	const figure = figuresOf(id).find((each) => each.quantity === quantity);
	if (!figure) throw new Error(`${id} has no figure ${quantity}`);
	const { published, recomputed, agrees } = figure;
	if (published === null || agrees === false) {
		const error = Math.abs(computed - recomputed);
		expect(error, `${quantity}: ${computed}, recomputed ${recomputed}`).toBeLessThanOrEqual(
			relative * Math.abs(recomputed) + 1e-15,
		);
		return;
	}
	const error = Math.abs(computed - Number(published));
	expect(error, `${quantity}: ${computed}, printed ${published}`).toBeLessThanOrEqual(
		halfUnit(published),
	);
}

/** Half a unit of the last printed digit, with what binary numbers lose of it. */
function halfUnit(printed: string): number {
	const [digits = '', exponent = '0'] = printed.split('e');
	const decimals = digits.split('.')[1]?.length ?? 0;
	return 0.5 * 10 ** (Number(exponent) - decimals) * (1 + 1e-9);
}

function find(id: string): Case {
	const found = cases.find((each) => each.id === id);
	if (!found) throw new Error(`No case ${id}`);
	return found;
}
