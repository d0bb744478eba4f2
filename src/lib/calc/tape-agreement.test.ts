import { expect, test } from 'vitest';
import { functions } from './functions/registry';
import { Memory } from './memory';
import { Note } from './note';
import { readLines } from './note-lines';

/** Numbers of an example in doubt: each becomes a quantity with an uncertainty of its own. */
function inDoubt(source: string): string {
	let count = 0;
	const lines: string[] = [];
	const call = source.replace(
		/(?<![\w.°^"])-?\d[\d.]*(?:e-?\d+)?(?: (?:[kMmunpµ]?(?:V|ohm|A|W|F|H|Hz|K|s|Ω)|%|degC)(?:\^\d)?)?(?![\w.])/g,
		(number) => {
			const name = `q_${++count}`;
			lines.push(`${name} = normal(${number}, ${widthOf(number)})`);
			return name;
		},
	);
	return [...lines, call].join('\n');
}

function widthOf(number: string): string {
	const [, unit = ''] = number.split(' ');
	return unit === 'degC' ? '1e-9 K' : unit === '%' ? '1e-9 %' : `1e-9 ${unit}`.trim();
}

function evaluated(source: string) {
	const cells = [{ id: 'a', kind: 'calculation', source } as const];
	const { lines } = readLines(cells, {});
	const note = new Note(lines, {}, new Memory());
	const line = lines.at(-1)!;
	return { computed: note.computed.get(line), troubles: note.troubles.get(line) };
}

const examples = [...functions.values()].flatMap((fn) =>
	fn.ofEstimate || fn.reads || fn.name === 'correlated'
		? []
		: fn.examples.map(({ source }) => source),
);

test.each(examples)('%s has the value of its tape, with everything in it in doubt', (source) => {
	const { computed } = evaluated(inDoubt(source));
	if (!computed?.doubt) return;
	const step = computed.doubt.steps[0]!;
	const value = Number(computed.value);
	expect(step.propagated.value).toBeCloseTo(
		value,
		10 - Math.ceil(Math.log10(Math.abs(value) + 1e-12)),
	);
});

test('most examples can be put in doubt', () => {
	const followed = examples.filter((source) => evaluated(inDoubt(source)).computed?.doubt);
	expect(followed.length).toBeGreaterThan(examples.length / 2);
});
