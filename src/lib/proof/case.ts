import type { Column } from '$lib/calc/results';
import type { Source } from './proof';

/** A figure of a case as the data hold it, and how it is asked of the engine. */
export interface Figure {
	quantity: string;
	published: string | null;
	unit: string;
	recomputed?: number | string;
	/** Whether print and recomputation agree; where they do not, `note` says why. */
	agrees?: boolean;
	confirmed: string;
	note?: string;
	/** A formula of the language, … */
	formula?: string;
	/** … or what to read from the results: a question of `answers.ts` and what it is asked of. */
	ask?: (string | number)[];
	coverage?: number;
	decisionRule?: 'simple';
	/** Agreement with the recomputed figure to a part of it, beside the printed digits. */
	relative?: number;
	/** Agreement to so much, in the unit of the figure. */
	within?: number;
	/** Digits that must agree, of a certified figure that prints more than binary numbers hold. */
	digits?: number;
	/** The printed figure is a bound from above. */
	relation?: 'below';
}

/** A published case, stated in lines of the language. */
export interface Case {
	id: string;
	title: string;
	source: Source;
	confirmed?: string;
	note?: string;
	lines?: string[];
	readings?: Column[];
	curve?: { name: string; x: string; y: string; degree: number };
	coverage?: number;
	/** Quantities of which trials are drawn. */
	trials?: string[];
	/** Set where the language cannot state the case; what lies below it is tested. */
	belowLanguage?: true;
	figures: Figure[];
}
