import { isRefusal, type Refusal } from '$lib/calc/tables/refusal';
import type { Worked } from '$lib/calc/tables/worked';

/** Value of an answer that was not refused. */
export function valueOf(answer: Worked | Refusal): number {
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer.value;
}
