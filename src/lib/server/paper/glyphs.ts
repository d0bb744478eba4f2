/** Code points that the paper's fonts have signs for; none before `useFonts`. */
let known: ReadonlySet<number> = new Set();

/** Reads which code points fonts can show. Until then nothing but ASCII counts as known. */
export function useFonts(fonts: readonly Buffer[]): void {
	known = new Set(fonts.flatMap((font) => [...codePointsOf(font)]));
}

/**
 * Text as the paper can show it: a sign that no font has, that cannot be seen or that turns the direction of what
 * follows stands as its number, [U+202E]. The attached record keeps the text as it was written.
 */
export function visible(text: string): string {
	let shown = '';
	for (const sign of text.normalize('NFC')) shown += isShown(sign) ? sign : numberOf(sign);
	return shown;
}

/**
 * The same within a formula, whose own font has the signs of mathematics: Greek, letters, arrows, operators, brackets
 * and alphabets (Unicode blocks).
 */
export function visibleInFormula(text: string): string {
	let shown = '';
	for (const sign of text.normalize('NFC'))
		shown += mathematical.test(sign) || isShown(sign) ? sign : numberOf(sign);
	return shown;
}

const mathematical =
	/[\u0391-\u03c9\u2016\u2026\u2032-\u2037\u2100-\u214f\u2190-\u22ff\u2308-\u230b\u25a0-\u25ff\u27c0-\u27ff\u2900-\u2aff\u{1d400}-\u{1d7ff}]/u;

/** Controls, unassigned and private signs, and those that take no room. */
const neverShown = /[\p{Cc}\p{Cf}\p{Co}\p{Cs}\p{Cn}\p{Zl}\p{Zp}]|\p{Default_Ignorable_Code_Point}/u;

function isShown(sign: string): boolean {
	const code = sign.codePointAt(0) ?? 0;
	if (sign === '\n' || (code >= 0x20 && code < 0x7f)) return true;
	return !neverShown.test(sign) && known.has(code);
}

function numberOf(sign: string): string {
	if (sign === '\t') return '    ';
	if (sign === '\r') return '';
	if (/\p{Zs}/u.test(sign)) return '\u00a0';
	return `[U+${(sign.codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, '0')}]`;
}

/** The code points in a font's `cmap` (OpenType 1.9, "cmap", formats 4 and 12) that are not shown by its glyph 0. */
function codePointsOf(font: Buffer): Set<number> {
	const points = new Set<number>();
	const tables = font.readUInt16BE(4);
	for (let i = 0; i < tables; i++) {
		const entry = 12 + 16 * i;
		if (font.toString('latin1', entry, entry + 4) !== 'cmap') continue;
		const at = font.readUInt32BE(entry + 8);
		const encodings = font.readUInt16BE(at + 2);
		for (let j = 0; j < encodings; j++) {
			const subtable = at + font.readUInt32BE(at + 4 + 8 * j + 4);
			const format = font.readUInt16BE(subtable);
			if (format === 4) readSegments(font, subtable, points);
			if (format === 12) readGroups(font, subtable, points);
		}
	}
	return points;
}

function readSegments(font: Buffer, at: number, points: Set<number>): void {
	const twice = font.readUInt16BE(at + 6);
	for (let i = 0; i < twice; i += 2) {
		const end = font.readUInt16BE(at + 14 + i);
		const start = font.readUInt16BE(at + 16 + twice + i);
		const delta = font.readUInt16BE(at + 16 + 2 * twice + i);
		const rangeAt = at + 16 + 3 * twice + i;
		const range = font.readUInt16BE(rangeAt);
		for (let code = start; code <= end && code !== 0xffff; code++) {
			const glyph =
				range === 0
					? (code + delta) & 0xffff
					: font.readUInt16BE(rangeAt + range + 2 * (code - start));
			if (glyph !== 0) points.add(code);
		}
	}
}

function readGroups(font: Buffer, at: number, points: Set<number>): void {
	const groups = font.readUInt32BE(at + 12);
	for (let i = 0; i < groups; i++) {
		const group = at + 16 + 12 * i;
		const [start, end] = [font.readUInt32BE(group), font.readUInt32BE(group + 4)];
		for (let code = start; code <= end; code++) points.add(code);
	}
}
