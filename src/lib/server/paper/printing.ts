import { createHash } from 'node:crypto';
import { env } from '../env';
import { Press, type PressTask } from './press';

/** Bytes of papers that are kept for those who ask again. */
const mostKept = 32_000_000;

export type Paper = PressTask['paper'];

/** Papers made and under way, by what they are made of; the one asked for last stands last. */
const papers = new Map<string, { pdf: Promise<Buffer>; bytes: number }>();
let press: Press | undefined;

/**
 * The PDF of a sealed revision's file, whose seal the caller has checked. Equal files give equal bytes. Throws
 * AppError `unavailable`.
 */
export async function print(file: string, paper: Paper): Promise<Buffer> {
	const { TYPESETTER_ENTRY: entry, ORIGIN: origin } = env();
	const key = createHash('sha256').update(`${paper} ${origin}\n${file}`).digest('hex');
	const known = papers.get(key);
	if (known) {
		papers.delete(key);
		papers.set(key, known);
		return known.pdf;
	}
	press ??= new Press({
		entry,
		limitMs: 20_000,
		residentMegabytes: 900,
		mostWaiting: 20,
		idleMs: 120_000,
	});
	const made = { pdf: press.print({ file, paper, origin }), bytes: 0 };
	papers.set(key, made);
	try {
		const pdf = await made.pdf;
		made.bytes = pdf.length;
		forget();
		return pdf;
	} catch (error) {
		if (papers.get(key) === made) papers.delete(key);
		throw error;
	}
}

/** Ends this process's typesetter. */
export function closePress(): void {
	press?.close();
	press = undefined;
	papers.clear();
}

function forget(): void {
	let kept = [...papers.values()].reduce((sum, { bytes }) => sum + bytes, 0);
	for (const [key, { bytes }] of papers) {
		if (kept <= mostKept) return;
		if (bytes > 0) papers.delete(key);
		kept -= bytes;
	}
}
