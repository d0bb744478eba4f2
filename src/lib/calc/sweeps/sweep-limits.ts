import { canonical } from '../language/characters';
import type { Note } from '../note';
import type { NoteLine } from '../note-lines';
import { shapeOf } from '../requirements';
import type { Requirement, SweepLimit } from '../results';
import { Trouble } from '../trouble';
import { crossingsOf, stretchesOf } from './stretches';

/** The requirements whose value is a quantity alone. */
export function requirementsOn(typed: string, note: Note): NoteLine[] {
	const name = canonical(typed);
	return note.lines.filter((line) => {
		if (!line.requirement || !line.body) return false;
		try {
			const { value } = shapeOf(line.body);
			return value.kind === 'name' && value.name === name;
		} catch (error) {
			if (error instanceof Trouble) return false;
			throw error;
		}
	});
}

interface Along {
	x: readonly number[];
	/** At each of `x`. */
	judged: readonly (Requirement | undefined)[];
	/** At any value. */
	at: (x: number) => Requirement | undefined;
	/** In the note as it is. */
	present: Requirement | undefined;
	/** How a value of the axis is read. */
	read: (x: number) => string;
}

/** A requirement along a sweep. */
export function limitAlong(line: NoteLine, name: string, along: Along): SweepLimit {
	const { x, judged, at, present, read } = along;
	const known = new Map(x.map((value, i) => [value, judged[i]]));
	const asked = (value: number) => {
		if (!known.has(value)) known.set(value, at(value));
		return known.get(value);
	};
	const verdicts = judged.map((one) => one?.verdict ?? null);
	const heights = edges.map((edge) => (value: number) => edge(asked(value)));
	const stretches = stretchesOf(x, verdicts, (value) => asked(value)?.verdict ?? null, heights).map(
		(one) => ({ ...one, text: `${read(one.from)} to ${read(one.to)}` }),
	);
	const crossings = (['lower', 'upper'] as const).flatMap((limit) => {
		const distance = (one: Requirement | undefined) => {
			const edge = one?.[limit];
			return one && edge !== null && edge !== undefined ? one.value - edge : null;
		};
		return crossingsOf(x, judged.map(distance), (value) => distance(asked(value))).map((value) => ({
			x: value,
			limit,
			text: read(value),
		}));
	});
	const anyOf = present ?? judged.find(Boolean);
	return {
		cell: line.cell,
		line: line.line,
		name,
		lower: limitsOf(judged.map((one) => one?.lower ?? null)),
		upper: limitsOf(judged.map((one) => one?.upper ?? null)),
		lowerText: anyOf?.lowerText ?? null,
		upperText: anyOf?.upperText ?? null,
		stretches,
		crossings: crossings.sort((a, b) => a.x - b.x),
		text: sentenceOf(stretches),
	};
}

/** Distances to the ends of guard bands and to limits: where one is zero, a verdict changes. */
const edges = (['lower', 'upper'] as const).flatMap((limit) =>
	[1, 0, -1].map((side) => (one: Requirement | undefined) => {
		const edge = one?.[limit];
		if (!one || edge === null || edge === undefined) return null;
		return one.value - edge + side * (one.guardBand?.[limit] ?? 0);
	}),
);

function limitsOf(limits: (number | null)[]): (number | null)[] | null {
	const [first] = limits.filter((limit) => limit !== null);
	if (first === undefined) return null;
	return limits.every((limit) => limit === null || limit === first) ? [first] : limits;
}

function sentenceOf(stretches: SweepLimit['stretches']): string {
	const parts = stretches.map(
		({ verdict, text }) => `${verdict ?? 'without a verdict'} from ${text}`,
	);
	const sentence = parts.join(', ');
	return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}
