import { doubled, singles, type Arm, type Stock } from './arms';
import { isRefusal, refuse, refuseNotPositive, type Refusal } from './refusal';

export interface PartQuestion extends Stock {
	wanted: number;
	/** Bounds of the value, both allowed. */
	atLeast?: number;
	atMost?: number;
	/** Whether two equal parts may stand for one. */
	doubled?: boolean;
	/** Longest list to answer with, 10 where nothing is said. */
	most?: number;
}

export interface FoundPart extends Arm {
	/** (value − wanted) / wanted. */
	error: number;
}

/** Preferred parts nearest to a value by ratio, nearest first. */
export function findParts(question: PartQuestion): FoundPart[] | Refusal {
	const { wanted, atLeast = 0, atMost = Infinity, most = 10 } = question;
	const fault = refuseNotPositive({ wanted, most });
	if (fault) return fault;
	// A decade to either side of the value holds more of any series than a list shows.
	const lowest = question.lowest ?? wanted / 20;
	const single = singles({ ...question, lowest, highest: question.highest ?? wanted * 20 });
	if (isRefusal(single)) return single;
	const found = [...single, ...(question.doubled ? doubled(single) : [])]
		.filter(({ resistance }) => resistance >= atLeast && resistance <= atMost)
		.map((arm) => ({ ...arm, error: (arm.resistance - wanted) / wanted }));
	if (found.length === 0)
		return refuse('nothingFound', 'No part of this series lies within these bounds', {
			mend: 'Loosen a bound, or choose a finer series.',
		});
	const off = ({ resistance }: Arm) => Math.abs(Math.log(resistance / wanted));
	const parts = ({ joined }: Arm) => (joined === 'single' ? 1 : 2);
	return found
		.sort((a, b) => (Math.abs(off(a) - off(b)) < 1e-12 ? parts(a) - parts(b) : off(a) - off(b)))
		.slice(0, most);
}
