import { doubled, singles, type Arm } from './arms';
import {
	judge,
	objection,
	refuseQuestion,
	type Divider,
	type DividerQuestion,
} from './divider-question';
import { isRefusal, refuse, type Refusal } from './refusal';

/**
 * The best dividers of preferred parts, best first. Of each upper arm only the run of lower arms is looked at that
 * keeps the output within the allowed error; as both lists rise, so does the run.
 */
export function findDividers(question: DividerQuestion): Divider[] | Refusal {
	const fault = refuseQuestion(question);
	if (fault) return fault;
	const single = singles(question);
	if (isRefusal(single)) return single;
	const twice = question.doubled ? doubled(single) : [];
	const best = new Best(orderOf(question.by ?? 'error'), question.most ?? 20);
	const objections = new Map<string, number>();
	const byError = (question.by ?? 'error') === 'error';
	const consider = (upper: Arm, lower: Arm) => {
		if (byError && best.isFull && !mayBeat(question, upper, lower, best.last)) return;
		const divider = judge(question, upper, lower);
		const against = objection(question, divider);
		if (against === undefined) best.offer(divider);
		else objections.set(against, (objections.get(against) ?? 0) + 1);
	};
	pair(question, single, single, consider);
	pair(question, single, twice, consider);
	pair(question, twice, single, consider);
	return best.list.length > 0 ? best.list : refuseNothing(question, objections);
}

function pair(
	question: DividerQuestion,
	uppers: readonly Arm[],
	lowers: readonly Arm[],
	consider: (upper: Arm, lower: Arm) => void,
): void {
	const { inputVoltage, outputVoltage, error = 0.05, load } = question;
	// A hair wider than asked for, so that no rounding here decides; the caller's bound is checked below.
	const least = lowerPerUpper(inputVoltage, outputVoltage * (1 - error));
	const most = lowerPerUpper(inputVoltage, Math.min(outputVoltage * (1 + error), inputVoltage));
	let start = 0;
	let end = 0;
	for (const upper of uppers) {
		const from = unloaded(least * upper.resistance, load) * (1 - 1e-12);
		const to = unloaded(most * upper.resistance, load) * (1 + 1e-12);
		while (start < lowers.length && lowers[start]!.resistance < from) start++;
		while (end < lowers.length && lowers[end]!.resistance <= to) end++;
		for (let i = start; i < end; i++) consider(upper, lowers[i]!);
	}
}

/** Loaded lower arm over upper arm for an output. */
function lowerPerUpper(input: number, output: number): number {
	return output < input ? output / (input - output) : Infinity;
}

/** Resistance that a load brings down to this; infinite where the load alone is less. */
function unloaded(loaded: number, load: number | undefined): number {
	if (load === undefined) return loaded;
	return loaded < load ? 1 / (1 / loaded - 1 / load) : Infinity;
}

/** Whether a pair may come nearer to the wanted output than another; a quick look that makes nothing. */
function mayBeat(question: DividerQuestion, upper: Arm, lower: Arm, last?: Divider): boolean {
	const { inputVoltage, outputVoltage, load } = question;
	const arm = lower.resistance;
	const loaded = load === undefined ? arm : (arm * load) / (arm + load);
	const output = (inputVoltage * loaded) / (upper.resistance + loaded);
	const bound = Math.abs(last?.error ?? Infinity) + 10 * step;
	return Math.abs(output - outputVoltage) <= bound * outputVoltage;
}

/** Errors are compared in steps of this: what differs by less differs by rounding. */
const step = 1e-12;

type Order = (a: Divider, b: Divider) => number;

function orderOf(by: NonNullable<DividerQuestion['by']>): Order {
	const steps = ({ error }: Divider) => Math.round(Math.abs(error) / step);
	const byError: Order = (a, b) => steps(a) - steps(b);
	const first: Order = by === 'error' ? byError : (a, b) => a[by] - b[by];
	return (a, b) => first(a, b) || a.parts - b.parts || byError(a, b) || a.current - b.current;
}

/** The first of many in an order, kept sorted while they come in. */
class Best {
	readonly list: Divider[] = [];

	constructor(
		private readonly order: Order,
		private readonly most: number,
	) {}

	get isFull(): boolean {
		return this.list.length >= this.most;
	}

	get last(): Divider | undefined {
		return this.list.at(-1);
	}

	offer(divider: Divider): void {
		const { list, order, most } = this;
		const last = list.at(-1);
		if (last && list.length >= most && order(divider, last) >= 0) return;
		let place = list.length;
		while (place > 0 && order(divider, list[place - 1]!) < 0) place--;
		list.splice(place, 0, divider);
		if (list.length > most) list.pop();
	}
}

function refuseNothing(
	{ error = 0.05 }: DividerQuestion,
	objections: ReadonlyMap<string, number>,
): Refusal {
	const reasons = [...objections].map(([reason, count]) => `${count} ${reason}`);
	const near = `within ${Number((error * 100).toPrecision(3))} %`;
	return reasons.length === 0
		? refuse('nothingFound', `No pair of this series comes ${near}`, {
				mend: 'Choose a finer series, a wider range of parts, or one part doubled.',
			})
		: refuse('nothingFound', `No pair ${near} meets every wish: ${reasons.join(', ')}`, {
				mend: 'Loosen a limit, or choose a finer series.',
			});
}
