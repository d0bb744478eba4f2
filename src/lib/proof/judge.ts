import type { Figure } from './case';
import type { Row } from './proof';

/** Whether a computed figure agrees, by which rule, and how far it is off. */
type Judgement = Pick<Row, 'agrees' | 'rule' | 'difference'>;

/** `scatter` is how far trials may lie from the exact figure, where the figure comes from trials. */
export function judge(figure: Figure, computed: number | string, scatter?: number): Judgement {
	const { published, recomputed, agrees } = figure;
	if (typeof computed === 'string')
		return { agrees: computed === (published ?? recomputed), rule: 'the same word' };
	if (figure.relation === 'below')
		return { agrees: computed <= Number(published), rule: 'not above' };
	if (figure.digits !== undefined) return byDigits(computed, figure.digits, Number(published));
	const useRecomputed = published === null || agrees === false || scatter !== undefined;
	const within = scatter ?? figure.within;
	if (within !== undefined) return byDistance(computed, reference(figure, useRecomputed), within);
	if (useRecomputed) return toRecomputation(computed, figure);
	const difference = computed - Number(published);
	const printed = Math.abs(difference) <= halfUnit(published);
	const kept = figure.relative === undefined || toRecomputation(computed, figure).agrees;
	return { agrees: printed && kept, rule: 'every printed digit', difference };
}

/** Half a unit of the last printed digit, with what binary numbers lose of it. */
export function halfUnit(printed: string): number {
	const [digits = '', exponent = '0'] = printed.toLowerCase().split('e');
	const decimals = digits.split('.')[1]?.length ?? 0;
	return 0.5 * 10 ** (Number(exponent) - decimals) * (1 + 1e-9);
}

/** Digits that agree: −log10 of the relative error, of the absolute one where the certified figure is zero. */
export function digitsOf(computed: number, certified: number): number {
	if (computed === certified) return 16;
	const error = Math.abs(computed - certified);
	return -Math.log10(certified === 0 ? error : error / Math.abs(certified));
}

function byDigits(computed: number, least: number, certified: number): Judgement {
	const reached = digitsOf(computed, certified);
	return {
		agrees: reached > least,
		rule: `${reached.toFixed(1)} digits, at least ${least}`,
		difference: computed - certified,
	};
}

function byDistance(computed: number, wanted: number, within: number): Judgement {
	const difference = computed - wanted;
	return {
		agrees: Math.abs(difference) <= within,
		rule: `within ${within.toPrecision(2)}`,
		difference,
	};
}

/** The recomputed figures have twelve digits. */
function toRecomputation(computed: number, figure: Figure): Judgement {
	const wanted = reference(figure, true);
	const difference = computed - wanted;
	const part = figure.relative ?? 1e-9;
	return {
		agrees: Math.abs(difference) <= part * Math.abs(wanted) + 1e-300,
		rule: 'the recomputed figure',
		difference,
	};
}

function reference(figure: Figure, recomputed: boolean): number {
	const wanted = recomputed ? (figure.recomputed ?? figure.published) : figure.published;
	if (wanted === null) throw new Error(`${figure.quantity} has nothing to be held against`);
	return Number(wanted);
}
