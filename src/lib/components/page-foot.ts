import type { SignOff } from '$lib/schemas/review';
import { signatureFields } from './signature-fields';
import { day } from './time';

/** Longest text of one place at the foot; the title block at the end of the sheet has it whole. */
const longest = 90;

/** A string as CSS writes it: everything but letters, digits, spaces and plain marks is escaped by its code point. */
function quoted(text: string): string {
	return `"${text.replace(/[^\w ,.-]/gu, (sign) => `\\${sign.codePointAt(0)!.toString(16)} `)}"`;
}

function short(text: string): string {
	const signs = Array.from(text);
	return signs.length > longest ? `${signs.slice(0, longest - 1).join('')}…` : text;
}

/** One place at the foot: its lines, one under the other. */
function place(where: string, lines: readonly string[], width: string): string {
	const texts = lines.map((line) => quoted(line)).join(' "\\a " ');
	return `@bottom-${where} { content: ${texts}; width: ${width}; ${look} }`;
}

const look =
	'text-align: left; font: 8pt/1.35 "Fira Sans", sans-serif; color: #222; white-space: pre-wrap; vertical-align: top; padding-top: 5pt; border-top: 0.75pt solid #000;';

/** What the foot of each printed page says: the title block in short. */
export interface PageFoot {
	/** MN-014 */
	number: string;
	title: string;
	/** "B", "B, draft", "A, withdrawn, no longer valid". */
	revision: string;
	signOffs: SignOff[];
	/** Stands under the page number. */
	seal?: string;
}

/** Rules that print the title block in short and the page number at the foot of each page. */
export function pageFoot({ number, title, revision, signOffs, seal }: PageFoot): string {
	const signed = signatureFields(signOffs).map(({ meaning, signOff, waiting }) => {
		const who = signOff ? `${signOff.name}, ${day(signOff.at)}` : waiting ? 'waiting' : '–';
		return `${meaning} ${short(who)}`;
	});
	const counter = '"Page " counter(page) " of " counter(pages)';
	const right = seal === undefined ? counter : `${counter} "\\a " ${quoted(seal)}`;
	return [
		'@page {',
		place('left', [short(title), `${number}, revision ${revision}`], '33%'),
		place('center', signed, '34%'),
		`@bottom-right { content: ${right}; width: 33%; ${look} text-align: right; }`,
		'}',
	].join(' ');
}
