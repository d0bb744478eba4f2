/**
 * JSON in the canonical form of RFC 8785, written from the text of the standard and sharing nothing with the product:
 * names sorted by UTF-16 code units (3.2.3), numbers and strings as ECMAScript writes them (3.2.2).
 */
export function canonicalJson(value: unknown): string {
	if (value === null || typeof value === 'boolean') return String(value);
	if (typeof value === 'number') {
		if (!Number.isFinite(value)) throw new Error('not a number of JSON');
		return String(value);
	}
	if (typeof value === 'string') return quoted(value);
	if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`;
	if (typeof value !== 'object') throw new Error(`not a value of JSON: ${typeof value}`);
	const members = Object.entries(value).filter(([, member]) => member !== undefined);
	members.sort(([a], [b]) => byCodeUnits(a, b));
	return `{${members.map(([name, member]) => `${quoted(name)}:${canonicalJson(member)}`).join(',')}}`;
}

function byCodeUnits(a: string, b: string): number {
	for (let at = 0; at < Math.min(a.length, b.length); at++) {
		const difference = a.charCodeAt(at) - b.charCodeAt(at);
		if (difference !== 0) return difference;
	}
	return a.length - b.length;
}

const short: Record<string, string> = {
	'\b': '\\b',
	'\t': '\\t',
	'\n': '\\n',
	'\f': '\\f',
	'\r': '\\r',
	'"': '\\"',
	'\\': '\\\\',
};

function quoted(text: string): string {
	let out = '"';
	for (const unit of text.split('')) {
		const code = unit.charCodeAt(0);
		out += short[unit] ?? (code < 0x20 ? `\\u${code.toString(16).padStart(4, '0')}` : unit);
	}
	return `${out}"`;
}
