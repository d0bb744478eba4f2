import { promisify } from 'node:util';
import { inflate } from 'node:zlib';

const beginning = '{"format":"halfdigit-sealed-revision-1"';
const bounds = {
	/** Attachments that are looked at. */
	files: 32,
	/** Bytes between the name of an attachment's type and its content. */
	dictionary: 2_000,
};

/** Whether bytes are those of a PDF. */
export function isPdf(bytes: Buffer): boolean {
	return bytes.subarray(0, 1024).includes('%PDF-');
}

/**
 * The sealed records attached to a PDF, each once. It looks for the contents of attached files (ISO 32000-1, 7.11.4)
 * wherever they stand, plain or deflated, and follows no reference, so that no PDF leads it in circles.
 */
export async function attachedRecords(pdf: Buffer, maxBytes: number): Promise<string[]> {
	const found = new Set<string>();
	let left = maxBytes;
	let files = 0;
	for (
		let at = pdf.indexOf('/EmbeddedFile');
		at >= 0 && files < bounds.files;
		at = pdf.indexOf('/EmbeddedFile', at + 1)
	) {
		const content = contentAfter(pdf, at);
		if (!content) continue;
		files += 1;
		const bytes = await plain(content, left);
		left -= bytes?.length ?? 0;
		const text = bytes?.toString('utf8');
		if (text?.startsWith(beginning)) found.add(text);
		if (left <= 0) break;
	}
	return [...found];
}

interface Content {
	dictionary: string;
	bytes: Buffer;
}

function contentAfter(pdf: Buffer, at: number): Content | undefined {
	const before = Math.max(0, at - bounds.dictionary);
	const from = before + pdf.subarray(before, at).lastIndexOf('obj');
	if (from < before) return undefined;
	const text = pdf.toString('latin1', from + 3, at + bounds.dictionary);
	const end = /\bstream(\r\n|\n)/.exec(text);
	if (!end) return undefined;
	const dictionary = text.slice(0, end.index);
	if (/\bendobj\b/.test(dictionary) || !/\/EmbeddedFile(?![A-Za-z])/.test(dictionary))
		return undefined;
	const start = from + 3 + end.index + end[0].length;
	// A length that stands elsewhere is not looked up: deflated content says itself where it ends.
	const length = /\/Length\s+(\d+)(?!\s+\d+\s+R)/.exec(dictionary)?.[1];
	return { dictionary, bytes: pdf.subarray(start, length ? start + Number(length) : undefined) };
}

async function plain({ dictionary, bytes }: Content, most: number): Promise<Buffer | undefined> {
	const filter = /\/Filter\s*\[?\s*([^\]>]*)/.exec(dictionary)?.[1]?.trim();
	if (filter === undefined) return bytes.subarray(0, most);
	if (!/^\/FlateDecode\b/.test(filter) || /^\/FlateDecode\s*\/\w+Decode/.test(filter))
		return undefined;
	try {
		return await promisify(inflate)(bytes, { maxOutputLength: Math.max(1, most) });
	} catch {
		return undefined;
	}
}
