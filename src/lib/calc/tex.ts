import { functions } from './functions/registry';
import type { Node, NodeOf } from './language/nodes';
import type { Readout } from './results';
import { callTex } from './tex-calls';
import { bracketed, level, within, type Piece } from './tex-pieces';
import { readoutTex, quantityTex, symbolTex, unitTex, words } from './tex-words';

/** How a name is set; undefined where its symbol stands for it. */
type Figure = (name: string) => Readout | undefined;

/** A formula as TeX, with names as symbols, or with the figures that `figure` gives for them. */
export function formulaTex(node: Node, figure: Figure = () => undefined): string {
	return piece(node, figure).tex;
}

function piece(node: Node, figure: Figure): Piece {
	const part = (inner: Node) => piece(inner, figure);
	const plain = (inner: Node) => part(inner).tex;
	switch (node.kind) {
		case 'number':
			return quantityTex(node.typed, node.unit);
		case 'unit':
			return { tex: unitTex(node.unit.label), level: level.atom };
		case 'name': {
			const shown = figure(node.name);
			return shown ? readoutTex(shown) : { tex: symbolTex(node.typed), level: level.atom };
		}
		case 'series':
			return { tex: words(node.name), level: level.atom };
		case 'boolean':
			return { tex: words(String(node.value)), level: level.atom };
		case 'text':
			return { tex: words(`\u201c${node.value}\u201d`), level: level.atom };
		case 'unary':
			return unary(node, part);
		case 'binary':
			return binary(node, part);
		case 'compare':
			return compare(node, part);
		case 'choice':
			return choice(node, part);
		case 'call':
			return callTex(node.name, symbolOf(node), node.args.map(part));
		case 'array':
			return array(node, plain);
		case 'range': {
			const ends = [node.start, ...(node.step ? [node.step] : []), node.end];
			const tex = ends.map((end) => within(part(end), level.sum)).join(' : ');
			return { tex, level: level.range };
		}
		case 'index': {
			const indexes = node.indexes.map(plain).join(',\\,');
			const tex = `${within(part(node.object), level.atom)}\\left[${indexes}\\right]`;
			return { tex, level: level.atom };
		}
		case 'convert': {
			const tex = `${within(part(node.value), level.sum)}\\;\\text{in}\\;${unitTex(node.unit.label)}`;
			return { tex, level: level.convert };
		}
	}
}

/** What stands behind a sign must not begin with one. */
function unsigned(inner: Piece, least: number): string {
	const tex = within(inner, least);
	return /^[-+]/.test(tex) ? bracketed(tex) : tex;
}

/** A function of the note is set as its symbol, one of the language with its name upright. */
function symbolOf({ name, typed }: NodeOf<'call'>): string {
	return functions.has(name) ? `\\operatorname{${name}}` : symbolTex(typed);
}

type Part = (node: Node) => Piece;

function unary({ op, value }: NodeOf<'unary'>, part: Part): Piece {
	const inner = part(value);
	if (op === '!') return { tex: `${within(inner, level.atom)}!`, level: level.power };
	if (op === 'not') return { tex: `\\lnot ${within(inner, level.sign)}`, level: level.sign };
	return { tex: `${op}${unsigned(inner, level.product)}`, level: level.sign };
}

const signs: Readonly<Record<string, { tex: string; level: number }>> = {
	'+': { tex: '+', level: level.sum },
	'-': { tex: '-', level: level.sum },
	'*': { tex: '\\cdot', level: level.product },
	'.*': { tex: '\\cdot', level: level.product },
	mod: { tex: '\\bmod', level: level.product },
	and: { tex: '\\land', level: level.and },
	or: { tex: '\\lor', level: level.or },
	xor: { tex: '\\oplus', level: level.or },
};

function binary({ op, left, right }: NodeOf<'binary'>, part: Part): Piece {
	const [a, b] = [part(left), part(right)];
	if (op === '/' || op === './')
		return { tex: `\\frac{${a.tex}}{${b.tex}}`, level: level.fraction };
	if (op === '^' || op === '.^')
		return { tex: `${within(a, level.atom)}^{${b.tex}}`, level: level.power };
	const sign = signs[op]!;
	const least = op === '-' || op === 'mod' ? sign.level + 1 : sign.level;
	return {
		tex: `${within(a, sign.level)} ${sign.tex} ${unsigned(b, least)}`,
		level: sign.level,
	};
}

const comparisons: Readonly<Record<string, string>> = {
	'<': '<',
	'<=': '\\le',
	'>': '>',
	'>=': '\\ge',
	'==': '=',
	'!=': '\\ne',
};

function compare({ ops, operands }: NodeOf<'compare'>, part: Part): Piece {
	const sides = operands.map((operand) => within(part(operand), level.sum));
	const tex = sides.map((side, i) => (i === 0 ? side : `${comparisons[ops[i - 1]!]} ${side}`));
	return { tex: tex.join(' '), level: level.compare };
}

function choice(node: NodeOf<'choice'>, part: Part): Piece {
	const rows: string[] = [];
	let rest: Node = node;
	for (; rest.kind === 'choice'; rest = rest.no)
		rows.push(`${part(rest.yes).tex} & \\text{if } ${part(rest.condition).tex}`);
	rows.push(`${part(rest).tex} & \\text{otherwise}`);
	return { tex: `\\begin{cases} ${rows.join(' \\\\ ')} \\end{cases}`, level: level.atom };
}

function array({ rows, flat }: NodeOf<'array'>, plain: (node: Node) => string): Piece {
	const between = flat ? ',\\; ' : ' & ';
	const lines = rows.map((row) => row.map(plain).join(between)).join(' \\\\ ');
	const tex = flat ? `\\left[${lines}\\right]` : `\\begin{bmatrix} ${lines} \\end{bmatrix}`;
	return { tex, level: level.atom };
}
