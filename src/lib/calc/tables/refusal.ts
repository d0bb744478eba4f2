/** Why a table or a fit gives no answer. */
export type RefusalReason =
	| 'notFinite'
	| 'outOfRange'
	| 'notPositive'
	| 'lengths'
	| 'tooFew'
	| 'rank'
	| 'degree'
	| 'notMonotonic'
	| 'order'
	| 'text'
	| 'overflow'
	| 'nothingFound';

/** An answer that cannot be given, as a value. `argument` names the input it is about, as the function's signature does. */
export interface Refusal {
	refused: RefusalReason;
	message: string;
	argument?: string;
	/** What to do about it, a sentence. */
	mend?: string;
}

export function refuse(
	refused: RefusalReason,
	message: string,
	more: { argument?: string; mend?: string } = {},
): Refusal {
	return { refused, message, ...more };
}

/** Whether an answer is a refusal. */
export function isRefusal(answer: unknown): answer is Refusal {
	return typeof answer === 'object' && answer !== null && 'refused' in answer;
}

/** Refuses the first of the named numbers that is infinite or not a number. */
export function refuseNotFinite(numbers: Readonly<Record<string, number>>): Refusal | undefined {
	for (const [argument, value] of Object.entries(numbers))
		if (!Number.isFinite(value))
			return refuse('notFinite', `${argument} is not a finite number`, { argument });
	return undefined;
}

/** Refuses the first of the named numbers that is not finite, or not above zero. */
export function refuseNotPositive(numbers: Readonly<Record<string, number>>): Refusal | undefined {
	const fault = refuseNotFinite(numbers);
	if (fault) return fault;
	for (const [argument, value] of Object.entries(numbers))
		if (value <= 0) return refuse('notPositive', `${argument} must be above zero`, { argument });
	return undefined;
}

/** Refuses a number outside `lower` to `upper`, both allowed, and names the range in its unit. */
export function refuseOutside(
	argument: string,
	value: number,
	lower: number,
	upper: number,
	unit: string,
): Refusal | undefined {
	const fault = refuseNotFinite({ [argument]: value });
	if (fault) return fault;
	if (value >= lower && value <= upper) return undefined;
	const range = `${lower} to ${upper}${unit ? ` ${unit}` : ''}`;
	return refuse('outOfRange', `${argument} is outside ${range}`, { argument });
}
