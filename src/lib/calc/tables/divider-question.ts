import type { Arm, Stock } from './arms';
import { refuse, refuseNotPositive, type Refusal } from './refusal';

/** What a divider must do. Volts, ohms, amperes, watts. */
export interface DividerQuestion extends Stock {
	inputVoltage: number;
	outputVoltage: number;
	/** Resistance that the output is loaded with. */
	load?: number;
	/** Largest relative error of the output, 0.05 where nothing is said, 0.2 at most. */
	error?: number;
	/** Which side of the wanted output is allowed; both where nothing is said. */
	side?: 'below' | 'above';
	/** Of the output without its load: the two arms in parallel. */
	sourceResistance?: Limits;
	/** Through the upper arm. */
	current?: Limits;
	/** Most that any single part may dissipate. */
	dissipation?: number;
	/** Whether one arm may be two equal parts. */
	doubled?: boolean;
	/** What the best one has least of; the output's error where nothing is said. */
	by?: 'error' | 'sourceResistance' | 'current' | 'dissipation';
	/** Longest list to answer with, 20 where nothing is said. */
	most?: number;
}

export interface Limits {
	atLeast?: number;
	atMost?: number;
}

export interface Divider {
	upper: Arm;
	lower: Arm;
	/** Number of parts, 2 or 3. */
	parts: number;
	outputVoltage: number;
	/** (output − wanted) / wanted. */
	error: number;
	sourceResistance: number;
	current: number;
	/** Of the part that dissipates most. */
	dissipation: number;
}

/** Refuses a question without an answer whatever the parts are. */
export function refuseQuestion(question: DividerQuestion): Refusal | undefined {
	const { inputVoltage, outputVoltage, load = 1, error = 0.05, dissipation = 1 } = question;
	const { most = 20, sourceResistance, current } = question;
	const fault = refuseNotPositive({ inputVoltage, outputVoltage, load, error, dissipation, most });
	if (fault) return fault;
	if (outputVoltage >= inputVoltage)
		return refuse('outOfRange', 'A divider gives less than its input', {
			argument: 'outputVoltage',
		});
	if (error > 0.2)
		return refuse('outOfRange', 'An output more than 20 % off is no match', { argument: 'error' });
	for (const [argument, limits] of Object.entries({ sourceResistance, current })) {
		const { atLeast = 0, atMost = Infinity } = limits ?? {};
		if (atLeast >= 0 && atMost > 0 && atLeast <= atMost) continue;
		return refuse('outOfRange', `The limits of ${argument} exclude each other`, { argument });
	}
	return undefined;
}

/** How a divider of two arms does. */
export function judge(question: DividerQuestion, upper: Arm, lower: Arm): Divider {
	const { inputVoltage, load } = question;
	const loaded = load === undefined ? lower.resistance : parallel(lower.resistance, load);
	const current = inputVoltage / (upper.resistance + loaded);
	const outputVoltage = current * loaded;
	const parts = (upper.joined === 'single' ? 1 : 2) + (lower.joined === 'single' ? 1 : 2);
	return {
		upper,
		lower,
		parts,
		outputVoltage,
		error: (outputVoltage - question.outputVoltage) / question.outputVoltage,
		sourceResistance: parallel(upper.resistance, lower.resistance),
		current,
		dissipation: Math.max(
			perPart(upper, current ** 2 * upper.resistance),
			perPart(lower, outputVoltage ** 2 / lower.resistance),
		),
	};
}

/** Equal parts share what their arm dissipates. */
function perPart({ joined }: Arm, power: number): number {
	return joined === 'single' ? power : power / 2;
}

function parallel(a: number, b: number): number {
	return 1 / (1 / a + 1 / b);
}

/** The first wish that a divider does not meet, in words; undefined for one that meets all. */
export function objection(question: DividerQuestion, divider: Divider): string | undefined {
	const { side, sourceResistance, current, dissipation = Infinity } = question;
	if (side === 'below' && divider.error > 0) return 'give more than wanted';
	if (side === 'above' && divider.error < 0) return 'give less than wanted';
	if (!keeps(sourceResistance, divider.sourceResistance)) return 'have another source resistance';
	if (!keeps(current, divider.current)) return 'draw another current';
	return divider.dissipation > dissipation ? 'heat a part too much' : undefined;
}

function keeps({ atLeast = 0, atMost = Infinity }: Limits = {}, value: number): boolean {
	return value >= atLeast && value <= atMost;
}
