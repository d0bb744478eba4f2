import { expect, test } from 'vitest';
import { judge, type Evidence, type View } from './judge';
import { firstLine, lineOf, tokenOf, type Operation } from './operations';

const figures = { quantities: { U: '5 V', wp1n1: '2 V' }, errors: [] };

function view(name: string, text: string, lines = lineOf('wp1n1', '2')): View {
	return {
		name,
		content: {
			title: 'Divider',
			cells: [
				{ id: 't', kind: 'text', source: text },
				{ id: 'c', kind: 'calculation', source: firstLine + lines },
			],
		},
		place: 'a2',
		figures,
	};
}

const wrote = (
	kind: Operation['kind'],
	value: string,
	{ over, acknowledged = true }: { over?: string; acknowledged?: boolean } = {},
): Operation => ({
	client: kind === 'line' ? 'wp1n1' : 'w1',
	kind,
	value,
	over,
	acknowledged,
});

const text = tokenOf('w1', 1) + tokenOf('w1', 2);

/** A story in which nothing is wrong: two tokens, two numbers of which the second stays, two moves of one cell. */
function story(): Evidence {
	return {
		operations: [
			wrote('append', tokenOf('w1', 1)),
			wrote('append', tokenOf('w1', 2)),
			wrote('append', tokenOf('w1', 3), { acknowledged: false }),
			wrote('line', '1'),
			wrote('line', '2', { over: '1' }),
			wrote('place', 'a1', { over: 'a0' }),
			wrote('place', 'a2', { over: 'a1' }),
		],
		firstPlace: 'a0',
		stored: view('the database', text),
		replicas: [view('one', text), view('two', text)],
		computed: figures,
	};
}

const clean = { lost: [], doubled: [], phantom: [], diverged: [] };

/** The story with the same change in the database and in every replica. */
function everywhere(change: (view: View) => View): Evidence {
	const told = story();
	return { ...told, stored: change(told.stored), replicas: told.replicas.map(change) };
}

const withText = (source: string) => (seen: View) => view(seen.name, source);
const withLines = (source: string) => (seen: View) => view(seen.name, text, source);

test('a story in which nothing is wrong is clean, whether an edit that was not acknowledged is there or not', () => {
	expect(judge(story())).toEqual({ ...clean, acknowledged: 6 });
	const third = withText(text + tokenOf('w1', 3));
	expect(judge(everywhere(third))).toEqual({ ...clean, acknowledged: 6 });
});

test('an acknowledged edit that is nowhere is lost', () => {
	expect(judge(everywhere(withText(tokenOf('w1', 2))))).toMatchObject({
		...clean,
		lost: [tokenOf('w1', 1)],
	});
});

test('an acknowledged edit that one replica lacks, or the database alone, is lost', () => {
	const told = story();
	const lacking = tokenOf('w1', 1);
	const { lost, diverged } = judge({ ...told, replicas: [view('one', lacking)] });
	expect(lost).toEqual([tokenOf('w1', 2)]);
	expect(diverged).toEqual(['one: another content']);
	expect(judge({ ...told, stored: view('the database', lacking) }).lost).toEqual([
		tokenOf('w1', 2),
	]);
});

test('an edit that is there twice is doubled', () => {
	expect(judge(everywhere(withText(text + tokenOf('w1', 1))))).toMatchObject({
		...clean,
		doubled: [tokenOf('w1', 1)],
	});
	const { doubled } = judge(everywhere(withLines(lineOf('wp1n1', '2') + lineOf('wp1n1', '2'))));
	expect(doubled).toEqual(['wp1n1 = 2, 2']);
});

test('what nobody wrote is a phantom, a torn edit too', () => {
	for (const strange of [tokenOf('w9', 1), 'w1.', 'anything'])
		expect(judge(everywhere(withText(text + strange)))).toMatchObject({
			...clean,
			phantom: [strange],
		});
	const { phantom } = judge(everywhere(withLines(lineOf('wp1n1', '2') + lineOf('wp9n9', '1'))));
	expect(phantom).toEqual(['wp9n9 = 1']);
	expect(judge(everywhere(withLines(lineOf('wp1n1', '22')))).phantom).toEqual(['wp1n1 = 22']);
	expect(judge(everywhere((seen) => ({ ...seen, place: 'zz' }))).phantom).toEqual(['place zz']);
});

test('a number or a place that an acknowledged one had replaced is a loss', () => {
	expect(judge(everywhere(withLines(lineOf('wp1n1', '1'))))).toMatchObject({
		...clean,
		lost: ['wp1n1 = 2'],
	});
	expect(judge(everywhere(withLines(''))).lost).toEqual(['wp1n1 = 1', 'wp1n1 = 2']);
	expect(judge(everywhere((seen) => ({ ...seen, place: 'a1' }))).lost).toEqual(['place a2']);
	expect(judge(everywhere((seen) => ({ ...seen, place: 'a0' }))).lost).toEqual([
		'place a1',
		'place a2',
	]);
});

test('of two moves at once either may stay, and nothing is lost', () => {
	const told = everywhere((seen) => ({ ...seen, place: 'b1' }));
	const operations = [...told.operations, wrote('place', 'b1', { over: 'a0' })];
	expect(judge({ ...told, operations })).toMatchObject(clean);
});

test('a replica with the same edits in another order, another title or another place is diverged', () => {
	const told = story();
	const others: View[] = [
		view('one', tokenOf('w1', 2) + tokenOf('w1', 1)),
		{ ...view('one', text), content: { ...view('one', text).content, title: 'Other' } },
		{ ...view('one', text), place: 'a1' },
	];
	for (const other of others)
		expect(judge({ ...told, replicas: [other] }).diverged).toEqual(['one: another content']);
});

test('figures that the engine does not compute from the stored content are diverged, on a page and in the database', () => {
	const told = story();
	const wrong = { quantities: { U: '5 V', wp1n1: '1 V' }, errors: [] };
	const blamed = { ...figures, errors: ['c:2 tooLarge'] };
	for (const other of [wrong, blamed]) {
		const { diverged } = judge({
			...told,
			stored: { ...told.stored, figures: other },
			replicas: [{ ...view('one', text), figures: other }, view('two', text)],
		});
		expect(diverged).toEqual(['the database: other figures', 'one: other figures']);
	}
});
